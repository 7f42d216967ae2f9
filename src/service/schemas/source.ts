import { z } from 'zod'
import { idSchema, timeSchema } from './common.ts'

const fetchSchema = z
  .object({
    run: timeSchema.describe('Reference time of the forecast'),
    state: z
      .enum(['running', 'stored', 'failed', 'interrupted', 'dropped'])
      .describe('Interrupted: the service stopped; dropped: removed for newer runs'),
    fieldId: idSchema.nullable().describe('The field that was made of it'),
    bytes: z.int().describe('What the field takes on the disk'),
    complaint: z.string().nullable().describe('Why it failed'),
    startedAt: timeSchema,
    finishedAt: timeSchema.nullable(),
  })
  .meta({ id: 'SourceFetch', description: 'A forecast run that was fetched, or was to be' })

export const sourceSchema = z
  .object({
    name: z.string(),
    runs: z.string().describe('When runs are made: a cron pattern, UTC'),
    availableAfterS: z.number(),
    stepHours: z.array(z.int()),
    keepRuns: z.int(),
    diskBudgetMB: z.number(),
    nextLookAt: timeSchema.nullable().describe('When it is looked for a run next of itself'),
    lastFetch: fetchSchema.nullable(),
    kept: z.array(fetchSchema).describe('Runs that are kept, newest first'),
  })
  .meta({ id: 'Source', description: 'A configured source of forecasts' })

export type Source = z.output<typeof sourceSchema>
export type SourceFetch = z.output<typeof fetchSchema>
