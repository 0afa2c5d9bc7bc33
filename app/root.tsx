import { use, type ReactNode } from 'react';
import { Links, Meta, Outlet, Scripts, ScrollRestoration, useRouteLoaderData } from 'react-router';
import { ErrorPage } from '~/components/error-page';
import { Page } from '~/components/page';
import { readOrganisation } from '~/models/organisation.server';
import { faultCookie, faultReferenceContext, makeFaultReference } from '~/services/fault-reference.server';
import { isFromOwnSite, isSecure, publicOrigin } from '~/services/request-origin.server';
import { setSecurityHeaders } from '~/services/security-headers.server';
import { loadViewer } from '~/services/session.server';
import { readTheme } from '~/services/theme.server';
import { organisationContext, viewerContext } from '~/services/viewer.server';
import { database } from '../db/connection';
import type { Route } from './+types/root';
import { DocumentContext } from './document-context';
import './app.css';

const frameRequest: Route.MiddlewareFunction = async ({ request, context }, next) => {
  const reference = makeFaultReference();
  context.set(faultReferenceContext, reference);
  const response = await next();
  setSecurityHeaders(response.headers, { secure: isSecure(request) });
  // Pages are made for one person at one moment: no cache between here and there keeps them.
  if (!response.headers.has('Cache-Control')) response.headers.set('Cache-Control', 'private, no-store');
  if (response.status >= 500) response.headers.append('Set-Cookie', faultCookie(reference));
  return response;
};

const refuseOtherSites: Route.MiddlewareFunction = ({ request }) => {
  if (request.method === 'GET' || request.method === 'HEAD' || isFromOwnSite(request)) return;
  const origin = request.headers.get('Origin');
  console.warn(
    `A form from ${origin ?? 'another site'} was refused: this site is ${publicOrigin(request)} (APP_ORIGIN)`,
  );
  throw new Response(
    'This form came from another site, so it was not taken. Open the page here and send it again.',
    {
      status: 403,
      statusText: 'Forbidden',
    },
  );
};

const loadPerson: Route.MiddlewareFunction = async ({ request, context }) => {
  const db = database();
  const [viewer, organisation] = await Promise.all([loadViewer(db, request), readOrganisation(db)]);
  context.set(viewerContext, viewer);
  context.set(organisationContext, organisation);
};

export const middleware: Route.MiddlewareFunction[] = [frameRequest, refuseOtherSites, loadPerson];

export async function loader({ request }: Route.LoaderArgs) {
  return { theme: await readTheme(request) };
}

export function Layout({ children }: { children: ReactNode }) {
  const facts = use(DocumentContext);
  const data = useRouteLoaderData<typeof loader>('root');
  const theme = data?.theme ?? facts?.theme ?? themeOfPage();
  return (
    <html lang="en" data-theme={theme}>
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <meta name="color-scheme" content={{ auto: 'light dark', light: 'light', night: 'dark' }[theme]} />
        <link rel="icon" href="/icon.svg" type="image/svg+xml" />
        <Meta />
        <Links />
      </head>
      <body>
        {children}
        <ScrollRestoration nonce={facts?.nonce} />
        <Scripts nonce={facts?.nonce} />
      </body>
    </html>
  );
}

function themeOfPage(): 'auto' | 'light' | 'night' {
  const theme = typeof document === 'undefined' ? undefined : document.documentElement.dataset.theme;
  return theme === 'light' || theme === 'night' ? theme : 'auto';
}

export default function App() {
  return <Outlet />;
}

export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  return (
    <Page homeTo="/" links={[]}>
      <ErrorPage error={error} />
    </Page>
  );
}
