import { hash, verify, type Options } from '@node-rs/argon2';

/**
 * Cost of a password hash: argon2id, 19 MiB of memory, two passes, one lane.
 * Source: OWASP Password Storage Cheat Sheet, the first of its equal-strength settings that keeps a small
 * server responsive. Raise them here; stored hashes follow at each person's next sign-in.
 */
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const satisfies Options;

// The package exports its algorithm numbers as a const enum, which isolated modules cannot read.
const argon2id = 2;

/** Longest password taken: enough for any sentence, too little to keep the machine busy. */
export const passwordMaxLength = 256;

/** Hash of a password in the PHC string format, which carries its own salt and cost. */
export async function hashPassword(password: string): Promise<string> {
  return hash(password, { ...cost, algorithm: argon2id });
}

/**
 * Whether the password is the one behind the hash. With no hash the answer is no, after the same work,
 * so that the time taken does not tell whether there was one.
 */
export async function checkPassword(password: string, passwordHash: string | null): Promise<boolean> {
  const matches = await verify(passwordHash ?? (await hashOfNothing()), password);
  return matches && passwordHash !== null;
}

/** Whether a hash was made with less than today's cost and should be made again while the password is at hand. */
export function isHashOutdated(passwordHash: string): boolean {
  const parts = /^\$argon2id\$v=19\$m=(\d+),t=(\d+),p=(\d+)\$/.exec(passwordHash);
  if (!parts) return true;
  const [memoryCost, timeCost, parallelism] = parts.slice(1).map(Number);
  return (
    (memoryCost ?? 0) < cost.memoryCost ||
    (timeCost ?? 0) < cost.timeCost ||
    (parallelism ?? 0) < cost.parallelism
  );
}

let dummy: Promise<string> | undefined;

function hashOfNothing(): Promise<string> {
  dummy ??= hashPassword(crypto.randomUUID());
  return dummy;
}
