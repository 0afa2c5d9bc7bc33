import { z } from 'zod';

/** What is kept of how a file was laid out. */
export const importHeaderSchema = z.object({
  /** The headings as they stand in the file, in its order. */
  headings: z.array(z.string()),
  delimiter: z.enum([',', ';', '\t']),
  /** `latin-1` when the file was not UTF-8. */
  encoding: z.enum(['utf-8', 'latin-1']),
  /** Whether the file is one of rejected rows coming back. */
  corrected: z.boolean(),
});
export type ImportHeader = z.output<typeof importHeaderSchema>;
