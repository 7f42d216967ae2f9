import { z } from 'zod'
import { idSchema, latitudeSchema, longitudeSchema, timeSchema } from './common.ts'
import {
  airSchema,
  balloonMembers,
  dragSchema,
  gasMembers,
  landingAltitudeSchema,
  launchSchema,
  neckLiftSchema,
  parachuteSchema,
  payloadSchema,
  planSchema,
  titleSchema,
} from './plan.ts'
import { runSchema } from './run.ts'

const observedAltitude = z.number().min(-500).max(60_000)

export const outcomeSchema = z
  .strictObject({
    burst: z
      .strictObject({ time: timeSchema.optional(), altitudeM: observedAltitude.optional() })
      .optional(),
    landing: z
      .strictObject({
        time: timeSchema.optional(),
        latitudeDeg: latitudeSchema,
        longitudeDeg: longitudeSchema,
        altitudeM: observedAltitude.optional(),
      })
      .optional(),
    remarks: z.string().max(4000).optional(),
  })
  .meta({ id: 'Outcome', description: 'What was observed when the flight was made' })

export type Outcome = z.output<typeof outcomeSchema>

const missSchema = z.object({
  runId: idSchema,
  landingDistanceM: z.number().nullable(),
  landingBearingDeg: z.number().nullable().describe('From the predicted landing to the observed'),
  landingTimeS: z.number().nullable().describe('Observed less predicted'),
  burstAltitudeM: z.number().nullable().describe('Observed less predicted'),
  burstTimeS: z.number().nullable().describe('Observed less predicted'),
})

export const outcomeAnswerSchema = z
  .object({ outcome: outcomeSchema, misses: z.array(missSchema) })
  .meta({ id: 'OutcomeAnswer', description: 'What happened, and how far each run was off it' })

export type Miss = z.output<typeof missSchema>

export const latestRunSchema = runSchema
  .pick({ id: true, createdAt: true, air: true, shift: true })
  .extend({
    burst: runSchema.shape.burst.pick({ time: true, altitudeM: true }),
    landing: runSchema.shape.landing.pick({
      time: true,
      latitudeDeg: true,
      longitudeDeg: true,
      distanceM: true,
      bearingDeg: true,
    }),
  })
  .meta({ id: 'LatestRun', description: 'The newest run of a flight, in short' })

export const flightSchema = z
  .object({
    id: idSchema,
    title: z.string(),
    createdAt: timeSchema,
    updatedAt: timeSchema,
    plan: planSchema,
    runCount: z.int(),
    latestRun: latestRunSchema,
    outcome: outcomeSchema.nullable(),
  })
  .meta({ id: 'Flight', description: 'A stored flight' })

export type Flight = z.output<typeof flightSchema>

/** A change to a stored flight: groups of numbers are merged, tagged choices replaced whole. */
export const flightChangeSchema = z
  .strictObject({
    title: titleSchema,
    launch: launchSchema.partial(),
    balloon: z.strictObject(balloonMembers).partial(),
    gas: z.strictObject(gasMembers).partial(),
    neckLiftG: neckLiftSchema,
    payload: payloadSchema.partial(),
    parachute: parachuteSchema,
    drag: dragSchema,
    landingAltitudeM: landingAltitudeSchema,
    air: airSchema,
  })
  .partial()
  .meta({ id: 'FlightChange', description: 'The members to change; the others stay' })

export type FlightChange = z.output<typeof flightChangeSchema>
