import { expect, it } from 'vitest';
import { readToast, redirectWithToast } from '~/services/flash.server';

function withCookie(cookie: string): Request {
  return new Request('http://intervale.test/classes', { headers: { Cookie: cookie } });
}

const toast = {
  message: 'Stored: seal of pump CP-07 – renewed',
  undo: { action: '/failures/7', label: 'Take it back', fields: { reason: 'slip' } },
};

it('carries a message to the next page and takes it off the browser there', async () => {
  const answer = await redirectWithToast('/classes', toast);
  expect(answer.status).toBe(302);
  expect(answer.headers.get('Location')).toBe('/classes');
  const [cookie = ''] = answer.headers.getSetCookie();
  expect(cookie).toContain('HttpOnly');

  const read = await readToast(withCookie(cookie.split(';')[0] ?? ''));
  expect(read.toast).toEqual({ ...toast, kind: 'done' });
  expect(read.headers.get('Set-Cookie')).toMatch(/^toast=; Max-Age=0/);
});

it('shows nothing when there is nothing, and sends no cookie', async () => {
  const read = await readToast(new Request('http://intervale.test/classes'));
  expect(read.toast).toBeNull();
  expect([...read.headers]).toEqual([]);
});

it('shows nothing that was not signed here', async () => {
  const [cookie = ''] = (await redirectWithToast('/classes', toast)).headers.getSetCookie();
  const value = decodeURIComponent(cookie.slice('toast='.length, cookie.indexOf(';')));
  const signature = value.slice(value.lastIndexOf('.'));
  const forged = Buffer.from(JSON.stringify({ message: 'Call this number' })).toString('base64') + signature;
  expect((await readToast(withCookie(`toast=${encodeURIComponent(forged)}`))).toast).toBeNull();
  expect((await readToast(withCookie(`toast=${encodeURIComponent(value)}`))).toast?.message).toBe(
    toast.message,
  );
});
