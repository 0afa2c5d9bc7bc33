import { randomBytes } from 'node:crypto';
import { createReadableStreamFromReadable } from '@react-router/node';
import { isbot } from 'isbot';
import { renderToPipeableStream } from 'react-dom/server';
import {
  ServerRouter,
  type EntryContext,
  type HandleErrorFunction,
  type RouterContextProvider,
} from 'react-router';
import { DocumentContext } from './document-context';
import { faultReferenceContext, logFault } from './services/fault-reference.server';
import { gatherChunks } from './services/gather-chunks.server';
import { isSecure } from './services/request-origin.server';
import { setSecurityHeaders } from './services/security-headers.server';
import { settings } from './services/settings.server';
import { readTheme } from './services/theme.server';

// Wrong settings stop the server when it starts, not the first person who comes.
settings();

/** How long a loader's promise may keep an answer open, in milliseconds. */
export const streamTimeout = 5_000;

export const handleError: HandleErrorFunction = (error, { request, context }) => {
  if (!request.signal.aborted) logFault(error, request, context);
};

export default async function handleRequest(
  request: Request,
  status: number,
  headers: Headers,
  routerContext: EntryContext,
  context: RouterContextProvider,
): Promise<Response> {
  const nonce = randomBytes(16).toString('base64');
  headers.set('Content-Type', 'text/html; charset=utf-8');
  setSecurityHeaders(headers, { secure: isSecure(request), nonce });
  if (request.method === 'HEAD') return new Response(null, { status, headers });

  const theme = await readTheme(request);
  const faultReference = context.get(faultReferenceContext);
  // A program that reads pages gets the whole at once.
  const waitForAll = isbot(request.headers.get('User-Agent')) || routerContext.isSpaMode;

  return new Promise((resolve, reject) => {
    let answered = false;
    let answerStatus = status;
    const answer = () => {
      answered = true;
      const body = gatherChunks().on('finish', () => clearTimeout(deadline));
      resolve(new Response(createReadableStreamFromReadable(body), { status: answerStatus, headers }));
      pipe(body);
    };
    const { pipe, abort } = renderToPipeableStream(
      <DocumentContext value={{ nonce, theme, faultReference }}>
        <ServerRouter context={routerContext} url={request.url} nonce={nonce} />
      </DocumentContext>,
      {
        nonce,
        [waitForAll ? 'onAllReady' : 'onShellReady']: answer,
        onShellError: reject,
        onError(error) {
          answerStatus = 500;
          // Before the answer has begun the error also reaches handleError.
          if (answered && !request.signal.aborted) logFault(error, request, context);
        },
      },
    );
    const deadline = setTimeout(abort, streamTimeout + 1_000);
  });
}
