import { use } from 'react';
import { isRouteErrorResponse, useLocation } from 'react-router';
import { DocumentContext } from '~/document-context';
import { LinkButton } from './button';

interface Explanation {
  title: string;
  text: string;
}

const OUR_FAULT: Explanation = {
  title: 'Something went wrong here',
  text: 'This is a fault of the site, not of what you did, and it has been noted. What was stored before is safe. Go back and try again in a minute.',
};

const BY_STATUS: Record<number, Explanation> = {
  401: {
    title: 'You are not signed in',
    text: 'Sign in to see this page. If you were signed in before, your session has ended.',
  },
  403: {
    title: 'This is not open to you',
    text: 'Your role does not include this page. Ask your administrator if it should.',
  },
  404: {
    title: 'There is nothing here',
    text: 'The address may be mistyped, or what it named belongs to a site you do not work at.',
  },
};

const OTHER: Explanation = {
  title: 'That could not be done',
  text: 'The request was not one this page can answer. Go back and try again.',
};

/** What went wrong and what to do about it, in plain words: for the ErrorBoundary of a route. */
export function ErrorPage({ error }: { error: unknown }) {
  const location = useLocation();
  const status = isRouteErrorResponse(error) ? error.status : 500;
  const { title, text } = status >= 500 ? OUR_FAULT : (BY_STATUS[status] ?? OTHER);
  const next = new URLSearchParams({ next: location.pathname + location.search });
  return (
    <div className="max-w-[52ch]">
      <title>{`${title} · Intervale`}</title>
      <h1>{title}</h1>
      <p className="mt-3">{reasonGiven(error) ?? text}</p>
      {status >= 500 && <FaultReference />}
      <div className="mt-6">
        {status === 401 ? (
          <LinkButton to={`/sign-in?${next}`}>Sign in</LinkButton>
        ) : (
          <LinkButton to="/" tone="quiet">
            Go to the first page
          </LinkButton>
        )}
      </div>
    </div>
  );
}

/** The sentence a route gave with its refusal. What the framework itself writes is not meant for people. */
function reasonGiven(error: unknown): string | undefined {
  if (!isRouteErrorResponse(error) || error.status >= 500 || typeof error.data !== 'string') return undefined;
  return error.data === '' || error.data.startsWith('Error:') ? undefined : error.data;
}

function FaultReference() {
  const reference = use(DocumentContext)?.faultReference ?? referenceFromCookie();
  if (reference === undefined) return null;
  return (
    <p className="mt-3">
      If it happens again, tell your administrator this reference:{' '}
      <b className="tabular" suppressHydrationWarning>
        {reference}
      </b>
    </p>
  );
}

/** The browser's copy of the reference, which came with the answer that failed. */
function referenceFromCookie(): string | undefined {
  if (typeof document === 'undefined') return undefined;
  return /(?:^|; )fault=([A-Z0-9]{8})/.exec(document.cookie)?.[1];
}
