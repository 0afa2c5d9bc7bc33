const dayMilliseconds = 86_400_000;

interface UndoneEntry {
  readonly loggedAt: Date;
  readonly loggedById: string | null;
  readonly voidedById: string | null;
}

/**
 * Whether a person may void this failure, or put it back: a lead any time; a technician what they logged
 * themselves, within 24 hours of logging it, and not against a void made by somebody else. The site is
 * checked apart from this.
 */
export function mayUndoFailure(
  failure: UndoneEntry,
  person: { id: string; roles: readonly string[] },
  now: Date,
): boolean {
  if (person.roles.includes('lead')) return true;
  if (!person.roles.includes('technician') || failure.loggedById !== person.id) return false;
  if (failure.voidedById !== null && failure.voidedById !== person.id) return false;
  return now.getTime() - failure.loggedAt.getTime() <= dayMilliseconds;
}
