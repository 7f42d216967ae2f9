import { z } from 'zod'
import { idSchema, problemSchema, timeSchema } from './common.ts'

export const jobSchema = z
  .object({
    id: idSchema,
    kind: z.enum(['dispersion', 'windows']),
    state: z
      .enum(['running', 'done', 'failed', 'cancelled', 'interrupted'])
      .describe('Interrupted: the service stopped while it ran; it can be repeated'),
    progress: z.number().min(0).max(1),
    createdAt: timeSchema,
    finishedAt: timeSchema.nullable(),
    problem: problemSchema.nullable().describe('Why it failed'),
  })
  .meta({ id: 'Job', description: 'A calculation that takes longer than two seconds' })

export type JobAnswer = z.output<typeof jobSchema>
