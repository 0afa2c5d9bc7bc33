import { createContext, redirect, type RouterContextProvider } from 'react-router';
import type { Organisation } from '~/models/organisation.server';
import type { Role } from '~/models/people.server';

export type { Role };

/** The person a request is made by. Loaded anew on every request, so that nothing here is ever stale. */
export interface Viewer {
  id: string;
  name: string;
  email: string;
  roles: readonly Role[];
  /** `all`, unless technician is the person's only role: then the sites they work at. */
  siteIds: readonly string[] | 'all';
}

/** What a loader, an action or a middleware gets as its `context`. */
export type RequestContext = Readonly<RouterContextProvider>;

/** Null when nobody is signed in. Set once a request by the root middleware. */
export const viewerContext = createContext<Viewer | null>(null);

/** Set once a request by the root middleware; reading it before that is an error. */
export const organisationContext = createContext<Organisation>();

/** Name, time zone and currency of the organisation. */
export function organisation(context: RequestContext): Organisation {
  return context.get(organisationContext);
}

/**
 * The person signed in.
 *
 * @throws a redirect to the sign-in page, which leads back here afterwards, when nobody is.
 */
export function requireViewer(context: RequestContext, request: Request): Viewer {
  const viewer = context.get(viewerContext);
  if (viewer) return viewer;
  const { pathname, search } = new URL(request.url);
  throw redirect(`/sign-in?${new URLSearchParams({ next: pathname + search })}`);
}

/**
 * The person signed in, who holds at least one of these roles.
 *
 * @throws a redirect to the sign-in page when nobody is signed in; a 403 answer in plain words when no role matches.
 */
export function requireRole(context: RequestContext, request: Request, ...roles: Role[]): Viewer {
  const viewer = requireViewer(context, request);
  if (roles.some((role) => viewer.roles.includes(role))) return viewer;
  throw new Response(
    `This needs the role of ${roles.join(' or ')}. Ask your administrator if you should have it.`,
    {
      status: 403,
      statusText: 'Forbidden',
    },
  );
}

/** Whether the records of a site are this person's to see. */
export function maySeeSite(viewer: Viewer, siteId: string): boolean {
  return viewer.siteIds === 'all' || viewer.siteIds.includes(siteId);
}

/**
 * Lets pass who may see the site.
 *
 * @throws a 404 answer otherwise: the same one an id that does not exist gets, so that ids cannot be tried out.
 */
export function requireSite(viewer: Viewer, siteId: string): void {
  if (!maySeeSite(viewer, siteId))
    throw new Response('There is nothing here.', { status: 404, statusText: 'Not found' });
}
