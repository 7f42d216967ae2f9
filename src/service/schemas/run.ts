import { z } from 'zod'
import { idSchema, latitudeSchema, longitudeSchema, timeSchema } from './common.ts'
import { planSchema } from './plan.ts'

const number = z.number()

export const cautionSchema = z
  .object({
    code: z.string(),
    message: z.string(),
    fromAltitudeM: number.optional(),
    toAltitudeM: number.optional(),
  })
  .meta({ id: 'Caution', description: 'What weakens the prediction, or must be heeded' })

export const shiftSchema = z
  .object({
    againstRunId: idSchema,
    landingDistanceM: number,
    landingBearingDeg: number.describe('From the earlier landing to this one'),
    landingTimeS: number.describe('This landing less the earlier'),
    burstAltitudeM: number.describe('This burst less the earlier'),
    planChanged: z.boolean().describe('The two runs flew different plans, not only different air'),
  })
  .meta({ id: 'Shift', description: 'How a run differs from the flight’s run before' })

const airAnswerSchema = z
  .object({
    kind: z.enum(['standard', 'profile', 'field']),
    id: idSchema.optional(),
    name: z.string(),
    validAt: timeSchema
      .nullable()
      .describe('Of a forecast: the release, or the nearest of its times'),
    referenceTime: timeSchema.optional().describe('Of a forecast: when its run began'),
  })
  .meta({ id: 'FlownAir', description: 'The air that a run was flown in' })

/** What a prediction says, stored or not. */
export const predictionMembers = {
  fill: z.object({
    grossLiftG: number,
    neckLiftG: number,
    freeLiftG: number,
    volumeM3: number,
    diameterM: number,
    gasMassG: number,
  }),
  ascent: z.object({ releaseRateMs: number, meanRateMs: number, durationS: number }),
  burst: z.object({
    time: timeSchema,
    elapsedS: number,
    latitudeDeg: latitudeSchema,
    longitudeDeg: longitudeSchema,
    altitudeM: number,
    pressureHPa: number,
    airTemperatureK: number,
    diameterM: number,
  }),
  descent: z.object({ durationS: number, peakSpeedMs: number, dragAreaM2: number }),
  landing: z.object({
    time: timeSchema,
    elapsedS: number,
    latitudeDeg: latitudeSchema,
    longitudeDeg: longitudeSchema,
    altitudeM: number,
    speedMs: number,
    distanceM: number.describe('From the launch site'),
    bearingDeg: number.describe('From the launch site, clockwise from north'),
  }),
  cautions: z.array(cautionSchema),
}

export const runSchema = z
  .object({
    id: idSchema,
    flightId: idSchema,
    createdAt: timeSchema,
    modelVersion: z.string(),
    air: airAnswerSchema,
    plan: planSchema,
    ...predictionMembers,
    shift: shiftSchema.nullable(),
  })
  .meta({ id: 'Run', description: 'A prediction: one plan flown in one air' })

export type Run = z.output<typeof runSchema>

export const trackRowSchema = z.object({
  elapsedS: number,
  time: timeSchema,
  latitudeDeg: latitudeSchema,
  longitudeDeg: longitudeSchema,
  altitudeM: number,
  verticalSpeedMs: number,
  windFromDeg: number.describe('Direction the wind blows from'),
  windSpeedMs: number,
  phase: z.enum(['ascent', 'burst', 'descent', 'landing']),
})

const trackRowsSchema = z
  .array(trackRowSchema)
  .describe('So dense that a straight line between points is never more than 50 m off')

export const trialSchema = runSchema
  .extend({ id: z.null(), flightId: z.null(), track: trackRowsSchema.optional() })
  .meta({ id: 'Trial', description: 'A prediction that was not stored; its track where asked for' })

export type Trial = z.output<typeof trialSchema>

export const trackSchema = z
  .object({
    runId: idSchema,
    cautions: z.array(cautionSchema),
    points: trackRowsSchema,
  })
  .meta({ id: 'Track', description: 'The track of a run' })
