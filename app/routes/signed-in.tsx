import type { ReactNode } from 'react';
import { data, Form, href, Outlet, useLocation, useRouteLoaderData } from 'react-router';
import { ErrorPage } from '~/components/error-page';
import { Page } from '~/components/page';
import { SearchBox } from '~/components/search/search-box';
import { useIsLate } from '~/components/use-is-late';
import { ThemeSwitch } from '~/components/theme-switch';
import { Toast } from '~/components/toast';
import { roleWords } from '~/models/people.server';
import type { loader as rootLoader } from '~/root';
import { readToast } from '~/services/flash.server';
import { requireViewer, type Role } from '~/services/viewer.server';
import type { Route } from './+types/signed-in';

/** The sections and who finds them, what is used most first. What a person may do there is each route's to decide. */
const sections: readonly { to: string; label: string; roles: readonly Role[] }[] = [
  { to: href('/since'), label: 'What is new', roles: ['lead', 'manager'] },
  { to: href('/classes'), label: 'Classes', roles: ['technician', 'lead', 'manager', 'admin'] },
  { to: href('/log'), label: 'Log a failure', roles: ['technician', 'lead'] },
  { to: href('/changes'), label: 'Changes', roles: ['lead', 'manager', 'admin'] },
  { to: href('/year-ahead'), label: 'Year ahead', roles: ['lead', 'manager', 'admin'] },
  { to: href('/imports'), label: 'Imports', roles: ['lead', 'admin'] },
  { to: href('/nights'), label: 'Nights', roles: ['lead', 'admin'] },
];

/** So many fit along the bottom of a phone; the others stand in the person's menu. */
const mostInSight = 5;

export async function loader({ context, request }: Route.LoaderArgs) {
  const { name, roles } = requireViewer(context, request);
  const { toast, headers } = await readToast(request);
  const own = sections.filter((section) => section.roles.some((role) => roles.includes(role)));
  return data(
    {
      person: { name, role: roles.map((role) => roleWords[role]).join(', ') || 'No role yet' },
      links: own.slice(0, mostInSight).map(({ to, label }) => ({ to, label })),
      moreLinks: [
        ...own.slice(mostInSight).map(({ to, label }) => ({ to, label })),
        { to: href('/methods'), label: 'Methods' },
      ],
      toast,
    },
    { headers },
  );
}

export default function SignedIn() {
  return (
    <Frame>
      <Outlet />
    </Frame>
  );
}

export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  return (
    <Frame>
      <ErrorPage error={error} />
    </Frame>
  );
}

/** The frame with what the person finds in it; bare when this route's own loader is what failed. */
function Frame({ children }: { children: ReactNode }) {
  const shown = useRouteLoaderData<typeof loader>('routes/signed-in');
  const root = useRouteLoaderData<typeof rootLoader>('root');
  const { pathname, search } = useLocation();
  const isCurrent = (to: string) => pathname === to || pathname.startsWith(`${to}/`);
  return (
    <Page
      homeTo={href('/')}
      links={(shown?.links ?? []).map((link) => ({ ...link, current: isCurrent(link.to) }))}
      moreLinks={(shown?.moreLinks ?? []).map((link) => ({ ...link, current: isCurrent(link.to) }))}
      person={shown?.person}
      search={shown && <SearchBox />}
      isLate={useIsLate()}
      signOut={shown && <SignOut />}
      themeSwitch={<ThemeSwitch current={root?.theme ?? 'auto'} returnTo={pathname + search} />}
      toast={shown?.toast && <Toast undo={shown.toast.undo}>{shown.toast.message}</Toast>}
    >
      {children}
    </Page>
  );
}

function SignOut() {
  return (
    <Form method="post" action={href('/sign-out')} className="border-hair mt-2 border-t pt-2">
      <button type="submit" className="min-h-11 font-bold underline">
        Sign out
      </button>
    </Form>
  );
}
