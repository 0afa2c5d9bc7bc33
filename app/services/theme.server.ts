import { createCookie } from 'react-router';
import { z } from 'zod';
import { isSecure } from './request-origin.server';

export const themeSchema = z.enum(['auto', 'light', 'night']);

/** `auto` follows the device. */
export type Theme = z.infer<typeof themeSchema>;

const themeCookie = createCookie('theme', {
  path: '/',
  httpOnly: true,
  sameSite: 'lax',
  maxAge: 365 * 24 * 60 * 60,
});

/** The theme chosen in this browser. */
export async function readTheme(request: Request): Promise<Theme> {
  const chosen: unknown = await themeCookie.parse(request.headers.get('Cookie'));
  return themeSchema.safeParse(chosen).data ?? 'auto';
}

/** The Set-Cookie header that keeps a choice of theme. */
export async function keepTheme(request: Request, theme: Theme): Promise<string> {
  return themeCookie.serialize(theme, { secure: isSecure(request) });
}
