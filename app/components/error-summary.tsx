export interface SummaryError {
  /** Id of the field to go to; null for what belongs to no field. */
  fieldId: string | null;
  message: string;
}

/** What stopped a form, above it, each error a link to its field. Nothing when there are none. */
export function ErrorSummary({
  errors,
  title = 'Please check this before it can be saved',
}: {
  errors: readonly SummaryError[];
  title?: string;
}) {
  if (errors.length === 0) return null;
  return (
    <div role="alert" tabIndex={-1} className="border-danger my-4 border-l-4 py-2 pl-4">
      <p className="text-danger font-bold">{title}</p>
      <ul className="mt-1">
        {errors.map(({ fieldId, message }) => (
          <li key={`${fieldId}-${message}`}>
            {fieldId === null ? (
              message
            ) : (
              <a href={`#${fieldId}`} className="inline-block py-1 max-md:py-2.5">
                {message}
              </a>
            )}
          </li>
        ))}
      </ul>
    </div>
  );
}
