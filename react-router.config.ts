import type { Config } from '@react-router/dev/config';

export default {
  ssr: true,
  future: { v8_middleware: true },
  // React Router writes this list into the build, and does not ask it about routes without a page. Where the
  // site is reached is known only when it runs: the middleware of app/root.tsx checks the Origin of every
  // request that is not a GET there, against APP_ORIGIN, and this list lets all through to it.
  allowedActionOrigins: ['**'],
} satisfies Config;
