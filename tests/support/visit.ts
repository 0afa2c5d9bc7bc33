import {
  createStaticHandler,
  RouterContextProvider,
  type ActionFunction,
  type LoaderFunction,
  type MiddlewareFunction,
} from 'react-router';
import * as root from '~/root';

/** What of a route module answers a request. */
export interface RouteUnderTest {
  /** As in app/routes.ts; `/` is the first page. */
  path: string;
  loader?: unknown;
  action?: unknown;
}

/**
 * Sends a request through the root's real middleware to one route's loader or action, as the web server does,
 * and gives the answer: what the route returns as JSON, what it throws as it is.
 */
export async function visit(route: RouteUnderTest, request: Request): Promise<Response> {
  const handler = createStaticHandler([
    {
      id: 'root',
      middleware: root.middleware as unknown as MiddlewareFunction[],
      children: [
        {
          id: 'route',
          path: route.path,
          loader: route.loader as LoaderFunction | undefined,
          action: route.action as ActionFunction | undefined,
        },
      ],
    },
  ]);
  return (await handler.queryRoute(request, {
    routeId: 'route',
    requestContext: new RouterContextProvider(),
    async generateMiddlewareResponse(query) {
      try {
        return toResponse(await query(request));
      } catch (error) {
        if (error instanceof Response) return error;
        throw error;
      }
    },
  })) as Response;
}

function toResponse(result: unknown): Response {
  if (result instanceof Response) return result;
  if (isWithInit(result)) return Response.json(result.data ?? null, result.init ?? undefined);
  return Response.json(result ?? null);
}

function isWithInit(result: unknown): result is { data: unknown; init: ResponseInit | null } {
  return (
    typeof result === 'object' &&
    result !== null &&
    'type' in result &&
    result.type === 'DataWithResponseInit'
  );
}

/** A form sent by a page of the site itself. */
export function formRequest(
  url: string,
  fields: Record<string, string>,
  headers: Record<string, string> = {},
): Request {
  return new Request(url, {
    method: 'POST',
    body: new URLSearchParams(fields),
    headers: { Origin: new URL(url).origin, ...headers },
  });
}

/** What the browser would send back of the cookies an answer set. */
export function cookiesOf(response: Response): string {
  return response.headers
    .getSetCookie()
    .map((cookie) => cookie.split(';')[0])
    .join('; ');
}
