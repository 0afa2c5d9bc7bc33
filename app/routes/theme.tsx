import { href, redirect } from 'react-router';
import { z } from 'zod';
import { ownPath } from '~/services/own-path.server';
import { keepTheme, themeSchema } from '~/services/theme.server';
import type { Route } from './+types/theme';

const formSchema = z.object({ theme: themeSchema, returnTo: z.string().optional() });

export function loader() {
  return redirect(href('/'));
}

export async function action({ request }: Route.ActionArgs) {
  const form = formSchema.safeParse(Object.fromEntries(await request.formData()));
  if (!form.success)
    throw new Response('There is no such theme.', { status: 400, statusText: 'Bad request' });
  const { theme, returnTo } = form.data;
  return redirect(ownPath(returnTo), { headers: { 'Set-Cookie': await keepTheme(request, theme) } });
}
