/**
 * Sets the headers that narrow what a browser lets any page of this site do. A header already there stays.
 *
 * @param secure whether people reach the site over https.
 * @param nonce for a document: the scripts that carry it may run. Without it nothing of the answer may run.
 */
export function setSecurityHeaders(
  headers: Headers,
  { secure, nonce }: { secure: boolean; nonce?: string },
): void {
  const values: Record<string, string> = {
    'Content-Security-Policy': nonce ? documentPolicy(nonce) : "default-src 'none'; frame-ancestors 'none'",
    'X-Content-Type-Options': 'nosniff',
    'X-Frame-Options': 'DENY',
    'Referrer-Policy': 'same-origin',
    'Cross-Origin-Opener-Policy': 'same-origin',
    'Permissions-Policy': 'camera=(), geolocation=(), microphone=(), payment=(), usb=()',
    ...(secure && { 'Strict-Transport-Security': 'max-age=31536000' }),
  };
  for (const [name, value] of Object.entries(values)) {
    if (!headers.has(name)) headers.set(name, value);
  }
}

function documentPolicy(nonce: string): string {
  return [
    "default-src 'self'",
    `script-src 'self' 'nonce-${nonce}'`,
    // The development server puts style sheets into the page; charts place their marks with style attributes.
    import.meta.env.DEV ? "style-src 'self' 'unsafe-inline'" : "style-src 'self'",
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' data:",
    "font-src 'self' data:",
    "connect-src 'self'",
    "object-src 'none'",
    "base-uri 'none'",
    "form-action 'self'",
    "frame-ancestors 'none'",
  ].join('; ');
}
