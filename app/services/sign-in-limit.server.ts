import { createHash } from 'node:crypto';
import { isIPv6 } from 'node:net';
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import type { Database } from '../../db/connection';

// Numbers are common practice, no source. A few slips are free; after that an e-mail can be tried some 150
// times an hour from anywhere, far too few to guess, and never shut for long by somebody else's trying.
const emailLimit = { keyPrefix: 'email', points: 5, duration: 15 * 60, blockDuration: 2 * 60 };
// A whole site may share one address, so more tries, and a longer wait.
const addressLimit = { keyPrefix: 'address', points: 30, duration: 15 * 60, blockDuration: 5 * 60 };

function limiter(db: Database, limit: typeof emailLimit): RateLimiterPostgres {
  return new RateLimiterPostgres({
    ...limit,
    storeClient: db,
    storeType: 'knex',
    tableName: 'sign_in_limits',
    tableCreated: true,
    clearExpiredByTimeout: false,
  });
}

/** Who is trying to sign in. The address is null where the web server does not tell it. */
export interface SignInTry {
  email: string;
  address: string | null;
}

/**
 * Counts a try before its password is looked at, so that tries side by side count too. Gives the seconds to
 * wait before the next one when there were too many for this e-mail or from this address, otherwise 0. The
 * answer is the same whether or not the e-mail belongs to anybody.
 */
export async function countTry(db: Database, { email, address }: SignInTry): Promise<number> {
  const waits = [consume(limiter(db, emailLimit), emailKey(email))];
  if (address !== null) waits.push(consume(limiter(db, addressLimit), addressKey(address)));
  return Math.max(...(await Promise.all(waits)));
}

/** Forgets the tries for an e-mail once its person is in, and takes this one off the address. */
export async function forgiveTries(db: Database, { email, address }: SignInTry): Promise<void> {
  await limiter(db, emailLimit).delete(emailKey(email));
  if (address !== null) await limiter(db, addressLimit).reward(addressKey(address));
  await db('sign_in_limits').where('expire', '<', Date.now()).delete();
}

async function consume(limits: RateLimiterPostgres, key: string): Promise<number> {
  try {
    await limits.consume(key);
    return 0;
  } catch (refusal) {
    if (refusal instanceof RateLimiterRes) return Math.ceil(refusal.msBeforeNext / 1000);
    throw refusal;
  }
}

// Hashed: the table's keys are short, and what people type is nobody's to read.
function emailKey(email: string): string {
  return createHash('sha256').update(email.toLowerCase()).digest('hex');
}

/** One home or office holds a whole /64 of IPv6 addresses: it counts as one. */
function addressKey(address: string): string {
  const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(address)?.[1];
  if (mapped) return mapped;
  if (!isIPv6(address)) return address.slice(0, 100);
  const [head = '', tail] = new URL(`http://[${address.split('%')[0]}]`).hostname.slice(1, -1).split('::');
  const front = head === '' ? [] : head.split(':');
  const back = tail ? tail.split(':') : [];
  const zeros = Array<string>(8 - front.length - back.length).fill('0');
  return [...front, ...zeros, ...back].slice(0, 4).join(':') + '::/64';
}
