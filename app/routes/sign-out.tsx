import { href, redirect } from 'react-router';
import { writeAudit } from '~/models/audit.server';
import { endSession } from '~/services/session.server';
import { database } from '../../db/connection';
import type { Route } from './+types/sign-out';

export function loader() {
  return redirect(href('/'));
}

export async function action({ request }: Route.ActionArgs) {
  const setCookie = await database().transaction(async (transaction) => {
    const { personId, setCookie } = await endSession(transaction, request);
    if (personId) {
      await writeAudit(transaction, { personId, action: 'sign-out', subject: 'person', subjectId: personId });
    }
    return setCookie;
  });
  return redirect(href('/sign-in'), { headers: { 'Set-Cookie': setCookie } });
}
