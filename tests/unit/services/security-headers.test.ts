import { expect, it } from 'vitest';
import { setSecurityHeaders } from '~/services/security-headers.server';

it('lets a document run the scripts it vouches for and no other', () => {
  const headers = new Headers();
  setSecurityHeaders(headers, { secure: true, nonce: 'abc' });
  const policy = headers.get('Content-Security-Policy') ?? '';
  expect(policy).toContain("script-src 'self' 'nonce-abc';");
  expect(policy).toContain("frame-ancestors 'none'");
  expect(/script-src[^;]*unsafe/.test(policy)).toBe(false);
  expect(headers.get('Strict-Transport-Security')).toBe('max-age=31536000');
});

it('leaves what a route has set, and promises https only where there is https', () => {
  const headers = new Headers({ 'Content-Security-Policy': "default-src 'none'" });
  setSecurityHeaders(headers, { secure: false });
  expect(headers.get('Content-Security-Policy')).toBe("default-src 'none'");
  expect(headers.has('Strict-Transport-Security')).toBe(false);
});
