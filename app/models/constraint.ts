/** The name of the database constraint an error comes from, or undefined when it comes from none. */
export function constraintOf(error: unknown): string | undefined {
  if (!(error instanceof Error) || !('constraint' in error)) return undefined;
  return typeof error.constraint === 'string' ? error.constraint : undefined;
}
