import { randomBytes } from 'node:crypto';
import { z } from 'zod';
import { roles, type Role } from '~/models/people.server';

const flag = z
  .enum(['0', '1'])
  .default('0')
  .transform((value) => value === '1');

const origin = z.url({ protocol: /^https?$/ }).transform((url) => new URL(url).origin);

const demoPeople = z
  .string()
  .transform((text, check) => {
    try {
      return JSON.parse(text) as unknown;
    } catch {
      check.addIssue('is not JSON');
      return z.NEVER;
    }
  })
  .pipe(
    z.array(z.object({ name: z.string(), role: z.enum(roles), email: z.string(), password: z.string() })),
  );

const settingsSchema = z
  .object({
    NODE_ENV: z.string().default('production'),
    SESSION_SECRET: z.string().min(32, 'must have at least 32 characters').optional(),
    APP_ORIGIN: origin.optional(),
    INTERVALE_TRUST_PROXY: z.coerce.number().int().min(0).max(10).default(0),
    INTERVALE_DEMO: flag,
    INTERVALE_DEMO_PEOPLE: demoPeople.optional(),
  })
  .refine((settings) => settings.SESSION_SECRET !== undefined || settings.NODE_ENV !== 'production', {
    path: ['SESSION_SECRET'],
    message: 'must be set in production: at least 32 random characters, the same for every web process',
  });

// Without a secret of its own a development process signs with one that dies with it.
const developmentSecret = randomBytes(32).toString('hex');

/** What the environment says of this installation. */
export interface Settings {
  /** Signs the cookies that carry messages between pages. */
  sessionSecret: string;
  /** Where people reach the product, when that is not what the web process itself sees: `https://intervale.example`. */
  appOrigin: string | undefined;
  /** How many reverse proxies stand in front and may be believed about the client; 0 believes no header. */
  trustedProxies: number;
  demo: boolean;
  /** The people of the demo with their passwords, shown on the sign-in page; empty outside the demo. */
  demoPeople: readonly { name: string; role: Role; email: string; password: string }[];
}

/**
 * Reads the settings from the environment. An empty variable counts as one that is not set.
 *
 * @throws Error that names each variable that is wrong, and never shows its value.
 */
export function settings(environment: NodeJS.ProcessEnv = process.env): Settings {
  const given = Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== ''));
  const read = settingsSchema.safeParse(given);
  if (!read.success) {
    const problems = read.error.issues.map((issue) => `${issue.path.join('.')} ${issue.message}`);
    throw new Error(`The settings in the environment are wrong: ${problems.join('; ')}`);
  }
  const { data } = read;
  return {
    sessionSecret: data.SESSION_SECRET ?? developmentSecret,
    appOrigin: data.APP_ORIGIN,
    trustedProxies: data.INTERVALE_TRUST_PROXY,
    demo: data.INTERVALE_DEMO,
    demoPeople: data.INTERVALE_DEMO ? (data.INTERVALE_DEMO_PEOPLE ?? []) : [],
  };
}
