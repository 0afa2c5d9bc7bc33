import { afterEach, describe, expect, it, vi } from 'vitest';
import { clientAddress, isFromOwnSite, isSecure, publicOrigin } from '~/services/request-origin.server';

afterEach(() => vi.unstubAllEnvs());

function request(headers: Record<string, string> = {}): Request {
  return new Request('http://10.0.0.5:3000/log', { method: 'POST', headers });
}

describe('where people reach the site', () => {
  const forwarded = { 'X-Forwarded-Proto': 'https', 'X-Forwarded-Host': 'intervale.example' };

  it('is what the request says, and no header of a stranger', () => {
    expect(publicOrigin(request(forwarded))).toBe('http://10.0.0.5:3000');
    expect(isSecure(request(forwarded))).toBe(false);
  });

  it('is what a trusted proxy says', () => {
    vi.stubEnv('INTERVALE_TRUST_PROXY', '1');
    expect(publicOrigin(request(forwarded))).toBe('https://intervale.example');
    expect(isSecure(request(forwarded))).toBe(true);
    expect(publicOrigin(request({ 'X-Forwarded-Host': 'not a host' }))).toBe('http://10.0.0.5:3000');
  });

  it('is APP_ORIGIN before all', () => {
    vi.stubEnv('APP_ORIGIN', 'https://intervale.example:8443');
    expect(publicOrigin(request())).toBe('https://intervale.example:8443');
  });
});

describe('a request from a page of this site', () => {
  it.each<[Record<string, string>, boolean]>([
    [{}, true],
    [{ Origin: 'http://10.0.0.5:3000' }, true],
    [{ Origin: 'https://intervale.example' }, true],
    [{ Origin: 'https://intervale.example.evil.example' }, false],
    [{ Origin: 'http://intervale.example' }, false],
    [{ Origin: 'null' }, false],
    [{ Origin: '' }, false],
    [{ 'Sec-Fetch-Site': 'same-origin' }, true],
    [{ 'Sec-Fetch-Site': 'none' }, true],
    [{ 'Sec-Fetch-Site': 'same-site' }, false],
    [{ 'Sec-Fetch-Site': 'cross-site' }, false],
  ])('%j: %j', (headers, own) => {
    vi.stubEnv('APP_ORIGIN', 'https://intervale.example');
    expect(isFromOwnSite(request(headers))).toBe(own);
  });
});

describe('the address of the client', () => {
  const forwarded = request({ 'X-Forwarded-For': '203.0.113.1, 203.0.113.2 ,203.0.113.3' });

  it.each([
    ['0', null],
    ['1', '203.0.113.3'],
    ['2', '203.0.113.2'],
    ['9', '203.0.113.1'],
  ])('with %s trusted proxies is %j', (trusted, address) => {
    vi.stubEnv('INTERVALE_TRUST_PROXY', trusted);
    expect(clientAddress(forwarded)).toBe(address);
  });

  it('is not known when a trusted proxy says nothing', () => {
    vi.stubEnv('INTERVALE_TRUST_PROXY', '1');
    expect(clientAddress(request())).toBeNull();
  });
});
