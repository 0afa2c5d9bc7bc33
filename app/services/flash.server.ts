import { createCookie, redirect } from 'react-router';
import { z } from 'zod';
import { settings } from './settings.server';

const toastSchema = z.object({
  message: z.string(),
  kind: z.enum(['done', 'warning']).default('done'),
  undo: z
    .object({ action: z.string(), label: z.string(), fields: z.record(z.string(), z.string()) })
    .optional(),
});

/** A message shown once, on the next page, with a form that takes the thing back where that is possible. */
export type Toast = z.output<typeof toastSchema>;

/** What `redirectWithToast` takes: `kind` is `done` unless given. */
export type ToastInput = z.input<typeof toastSchema>;

function toastCookie() {
  const { sessionSecret, appOrigin } = settings();
  return createCookie('toast', {
    path: '/',
    httpOnly: true,
    sameSite: 'lax',
    secure: appOrigin?.startsWith('https:') ?? false,
    maxAge: 60,
    secrets: [sessionSecret],
  });
}

/** A redirect to a page of the product that shows the message there, once. */
export async function redirectWithToast(url: string, toast: ToastInput): Promise<Response> {
  const value = await toastCookie().serialize(toastSchema.parse(toast));
  return redirect(url, { headers: { 'Set-Cookie': value } });
}

/**
 * The message waiting for this request, if its signature holds, and the headers that take it off the browser.
 * Send the headers with the page that shows it.
 */
export async function readToast(request: Request): Promise<{ toast: Toast | null; headers: Headers }> {
  const cookie = toastCookie();
  const headers = new Headers();
  const sent: unknown = await cookie.parse(request.headers.get('Cookie'));
  if (sent === null) return { toast: null, headers };
  headers.append('Set-Cookie', await cookie.serialize('', { maxAge: 0 }));
  return { toast: toastSchema.safeParse(sent).data ?? null, headers };
}
