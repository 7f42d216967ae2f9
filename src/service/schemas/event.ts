import { z } from 'zod'
import { idSchema, problemSchema, timeSchema } from './common.ts'
import { latestRunSchema } from './flight.ts'
import { airSchema } from './plan.ts'
import { shiftSchema } from './run.ts'

const eventMembers = { id: idSchema, flightId: idSchema, at: timeSchema }

export const eventSchema = z
  .discriminatedUnion('kind', [
    z.object({ ...eventMembers, kind: z.literal('run-stored'), run: latestRunSchema }),
    z.object({
      ...eventMembers,
      kind: z.literal('landing-moved'),
      run: latestRunSchema,
      tellBeyondM: z.number(),
      moved: shiftSchema.describe('Against the run whose landing was told before'),
    }),
    z.object({
      ...eventMembers,
      kind: z.literal('rerun-failed'),
      air: airSchema.describe('The newer air, in which the flight cannot be flown'),
      problem: problemSchema,
    }),
  ])
  .meta({
    id: 'FlightEvent',
    description:
      'A run was stored, the landing moved farther than the watch allows, or a flight could not be flown again in newer air',
  })

export type FlightEvent = z.output<typeof eventSchema>
