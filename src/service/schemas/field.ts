import { z } from 'zod'
import { idSchema, latitudeSchema, longitudeSchema, timeSchema } from './common.ts'

const corner = z.object({ latitudeDeg: latitudeSchema, longitudeDeg: longitudeSchema })

export const fieldAnswerSchema = z
  .object({
    id: idSchema,
    name: z.string(),
    createdAt: timeSchema,
    centre: z.int().describe('Originating centre, WMO common code table C-11'),
    subCentre: z.int(),
    process: z.int().describe('Identifier of the forecast process, defined by the centre'),
    referenceTime: timeSchema.describe('When the run began'),
    validTimes: z.array(timeSchema).describe('Ascending; between them the air is interpolated'),
    grid: z.object({
      description: z.string(),
      columns: z.int(),
      rows: z.int(),
      wraps: z.boolean().describe('The grid goes all round the earth'),
      corners: z
        .array(corner)
        .describe('First row’s first and last point, last row’s first and last point'),
    }),
    levelsHPa: z.array(z.number()).describe('From the ground up'),
    humidityLevels: z.int().describe('How many of the levels carry humidity'),
    heights: z
      .object({ lowestGeopotentialHeightM: z.number(), highestGeopotentialHeightM: z.number() })
      .describe('Of the lowest point of the lowest level and the highest of the highest'),
    skipped: z
      .array(z.object({ reason: z.string(), messages: z.int() }))
      .describe('Messages that were passed over, and why'),
  })
  .meta({ id: 'Field', description: 'An uploaded forecast on a grid' })

export type FieldAnswer = z.output<typeof fieldAnswerSchema>

export const fieldUploadQuery = z.strictObject({
  name: z
    .string()
    .trim()
    .min(1)
    .max(200)
    .optional()
    .describe('In place of one made of the centre and the run'),
})

export const columnQuery = z.strictObject({
  latitudeDeg: z.coerce.number().min(-90).max(90).describe('Degrees north of the equator, WGS 84'),
  longitudeDeg: z.coerce.number().min(-180).max(180).describe('Degrees east of Greenwich, WGS 84'),
  time: timeSchema,
  format: z.enum(['json', 'csv']).optional().describe('Wins over the Accept header'),
})

export const columnLevelSchema = z
  .object({
    pressureHPa: z.number(),
    geopotentialHeightM: z.number(),
    temperatureK: z.number(),
    relativeHumidityPercent: z.number().optional().describe('Over liquid water'),
    windFromDeg: z.number(),
    windSpeedMs: z.number(),
    u: z.number().describe('Towards east, m/s'),
    v: z.number().describe('Towards north, m/s'),
  })
  .meta({ id: 'ColumnLevel', description: 'A level of a forecast over a place' })

export type ColumnLevel = z.output<typeof columnLevelSchema>

export const columnSchema = z
  .object({
    fieldId: idSchema,
    referenceTime: timeSchema,
    latitudeDeg: latitudeSchema,
    longitudeDeg: longitudeSchema,
    time: timeSchema,
    levels: z.array(columnLevelSchema),
  })
  .meta({ id: 'Column', description: 'A forecast over a place at a time, from the ground up' })
