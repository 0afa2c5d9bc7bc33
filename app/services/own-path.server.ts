const base = 'http://own.invalid';

/**
 * A place on this site to send somebody on to, taken from a form or an address, where anybody may have
 * written anything. Gives `/path?query#part`, or the fallback for whatever could lead to another site.
 */
export function ownPath(value: unknown, fallback = '/'): string {
  if (typeof value !== 'string' || !value.startsWith('/')) return fallback;
  // Browsers read a backslash as a slash and drop control characters, so '/\evil' and '/\t/evil' are '//evil'.
  // eslint-disable-next-line no-control-regex
  if (/[\\\u0000-\u001f\u007f]/.test(value) || !URL.canParse(value, base)) return fallback;
  const { origin, pathname, search, hash } = new URL(value, base);
  if (origin !== base || pathname.startsWith('//')) return fallback;
  return pathname + search + hash;
}
