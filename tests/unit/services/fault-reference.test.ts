import { RouterContextProvider } from 'react-router';
import { expect, it, vi } from 'vitest';
import { faultReferenceContext, logFault, makeFaultReference } from '~/services/fault-reference.server';

it('is short, and different each time', () => {
  const references = Array.from({ length: 100 }, makeFaultReference);
  expect(new Set(references).size).toBe(100);
  for (const reference of references) expect(reference).toMatch(/^[A-Z0-9]{8}$/);
});

it('heads the log of the fault, without query string or what the error carries along', () => {
  const log = vi.spyOn(console, 'error').mockImplementation(() => undefined);
  const context = new RouterContextProvider();
  context.set(faultReferenceContext, 'KT34WXYA');
  const error = Object.assign(new Error('duplicate key'), { detail: 'Key (email)=(ada@larkmoor.example)' });
  logFault(error, new Request('http://intervale.test/sign-in?next=/secret'), context);
  const written = log.mock.calls.flat().join(' ');
  log.mockRestore();
  expect(written).toContain('fault KT34WXYA GET /sign-in\n');
  expect(written).toContain('duplicate key');
  expect(written).toContain('fault-reference.test');
  expect(written).not.toMatch(/secret|ada@/);
});
