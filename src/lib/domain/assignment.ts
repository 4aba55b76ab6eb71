import { z } from 'zod';

/** A spectrum passed on; an empty person takes it back from whoever has it. */
export const assignmentInputSchema = z.object({
  person: z.union([z.uuid(), z.literal('').transform(() => null)]),
  note: z.string().trim().max(1000).default(''),
});
export type AssignmentInput = z.output<typeof assignmentInputSchema>;
