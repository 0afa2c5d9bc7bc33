import { href, redirect } from 'react-router';
import { requireViewer, type Role } from '~/services/viewer.server';
import type { Route } from './+types/home';

export function loader({ context, request }: Route.LoaderArgs) {
  const { roles } = requireViewer(context, request);
  throw redirect(firstPage(roles));
}

/** Where a person's work begins: a desk role outweighs the plant room, and the plant room the set-up. */
function firstPage(roles: readonly Role[]): string {
  if (roles.includes('lead') || roles.includes('manager')) return href('/since');
  if (roles.includes('technician')) return href('/log');
  if (roles.includes('admin')) return href('/imports');
  throw new Response(
    'You have no role here yet. Ask your administrator for one, then open this page again.',
    {
      status: 403,
      statusText: 'Forbidden',
    },
  );
}

export default function Home() {
  return null;
}
