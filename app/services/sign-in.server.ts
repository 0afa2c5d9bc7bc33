import { writeAudit } from '~/models/audit.server';
import { findCredentials, setPasswordHash } from '~/models/people.server';
import type { Database } from '../../db/connection';
import { checkPassword, hashPassword, isHashOutdated } from './password.server';
import { startSession } from './session.server';
import { countTry, forgiveTries } from './sign-in-limit.server';

export type SignInResult =
  | { outcome: 'signed-in'; setCookie: string }
  /** Wrong password, unknown e-mail, disabled person, no password: which of them is not told to anybody. */
  | { outcome: 'refused' }
  | { outcome: 'wait'; seconds: number };

/**
 * Signs a person in with e-mail and password. Every refusal takes the work of one password check.
 *
 * @param address network address of the client, null when unknown.
 */
export async function signIn(
  db: Database,
  request: Request,
  { email, password, address }: { email: string; password: string; address: string | null },
): Promise<SignInResult> {
  const seconds = await countTry(db, { email, address });
  if (seconds > 0) return { outcome: 'wait', seconds };

  const person = await findCredentials(db, email);
  const passwordHash = person && !person.disabled ? person.passwordHash : null;
  const matches = await checkPassword(password, passwordHash);
  if (!person || passwordHash === null || !matches) return { outcome: 'refused' };

  const { personId } = person;
  const newHash = isHashOutdated(passwordHash) ? await hashPassword(password) : undefined;
  const setCookie = await db.transaction(async (transaction) => {
    if (newHash) await setPasswordHash(transaction, personId, newHash);
    await writeAudit(transaction, { personId, action: 'sign-in', subject: 'person', subjectId: personId });
    return startSession(transaction, request, personId);
  });
  await forgiveTries(db, { email, address });
  return { outcome: 'signed-in', setCookie };
}
