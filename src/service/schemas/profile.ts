import { z } from 'zod'
import { soundingFormats } from '../../soundings/recognise.ts'
import { idSchema, latitudeSchema, longitudeSchema, timeSchema } from './common.ts'

const levelsSummarySchema = z.object({
  levels: z.int(),
  lowestAltitudeM: z.number().nullable(),
  highestAltitudeM: z.number().nullable(),
})

const observedAscentSchema = z
  .object({
    durationS: z.number().describe('Between the lowest and the highest level with a time'),
    lowestAltitudeM: z.number(),
    highestAltitudeM: z.number(),
    meanRateMs: z.number(),
    drift: z
      .object({
        altitudeM: z.number(),
        latitudeDeg: latitudeSchema,
        longitudeDeg: longitudeSchema,
        distanceM: z.number(),
        bearingDeg: z.number(),
      })
      .nullable()
      .describe('Where the highest level with a displacement stood, seen from the site'),
  })
  .meta({
    id: 'ObservedAscent',
    description: 'The flight that a sounding was, for comparison with a predicted one',
  })

export const profileAnswerSchema = z
  .object({
    id: idSchema,
    name: z.string(),
    createdAt: timeSchema,
    validAt: timeSchema.nullable(),
    latitudeDeg: latitudeSchema.nullable(),
    longitudeDeg: longitudeSchema.nullable(),
    temperature: levelsSummarySchema,
    wind: levelsSummarySchema,
    observedAscent: observedAscentSchema.nullable().describe('Null where the levels tell no times'),
    notes: z
      .array(
        z.object({
          line: z.int().optional(),
          path: z.string().optional(),
          message: z.string(),
        }),
      )
      .describe('What was completed, limited, ignored or dropped'),
  })
  .meta({ id: 'Profile', description: 'An uploaded sounding' })

export type ProfileAnswer = z.output<typeof profileAnswerSchema>

export const levelAnswerSchema = z
  .object({
    geopotentialHeightM: z.number(),
    altitudeM: z.number(),
    pressureHPa: z.number().optional(),
    temperatureK: z.number().optional(),
    dewPointK: z.number().optional(),
    relativeHumidityPercent: z.number().optional(),
    windFromDeg: z.number().optional(),
    windSpeedMs: z.number().optional(),
    elapsedS: z.number().optional(),
    latitudeDisplacementDeg: z.number().optional(),
    longitudeDisplacementDeg: z.number().optional(),
  })
  .meta({ id: 'Level', description: 'A completed level of a sounding' })

export const uploadQuery = z.strictObject({
  name: z.string().trim().min(1).max(200).optional().describe('In place of the content’s name'),
  validAt: timeSchema.optional().describe('In place of the content’s time'),
  format: z
    .enum(soundingFormats)
    .optional()
    .describe('Recognised from the content where it is left out'),
})
