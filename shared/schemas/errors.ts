import { z } from 'zod';

/** The one shape of every error answer. `code` is stable; `message` says what was seen and what to do. */
export const ErrorAnswer = z.strictObject({
  error: z.strictObject({
    code: z.string(),
    message: z.string(),
    fields: z.array(z.strictObject({ path: z.string(), message: z.string() })),
  }),
});
export type ErrorAnswer = z.infer<typeof ErrorAnswer>;
