import { z } from 'zod'
import { idSchema, latitudeSchema, longitudeSchema, timeSchema } from './common.ts'
import { cautionSchema } from './run.ts'

/** Most levels of a kind that one notice lists. */
const MOST_LEVELS = 60

/** A list of numbers with commas between, as a query has it. */
function numberList(least: number, most: number) {
  return z
    .string()
    .max(1000)
    .transform((text) =>
      text
        .split(',')
        .filter((part) => part.trim() !== '')
        .map(Number),
    )
    .pipe(z.array(z.number().min(least).max(most)).max(MOST_LEVELS))
    .optional()
}

export const noticeQuery = z.strictObject({
  flightLevels: numberList(0, 2000).describe('Hundreds of feet, with commas between'),
  altitudesM: numberList(-500, 60_000).describe(
    'Geometric metres above mean sea level, with commas between',
  ),
})

const crossingSchema = z
  .object({
    flightLevel: z.number().optional(),
    levelAltitudeM: z.number().optional(),
    way: z.enum(['up', 'down']),
    time: timeSchema,
    elapsedS: z.number(),
    latitudeDeg: latitudeSchema,
    longitudeDeg: longitudeSchema,
    altitudeM: z.number(),
    pressureHPa: z.number(),
  })
  .meta({
    id: 'Crossing',
    description: 'A passage of the flight level or the altitude that was asked for',
  })

export const noticeSchema = z
  .object({
    runId: idSchema,
    flightId: idSchema,
    title: z.string(),
    balloonClass: z
      .object({
        name: z.enum(['light', 'medium', 'heavy']),
        reasons: z.array(z.string()).describe('The limits that decide, with their numbers'),
        missing: z
          .array(z.string())
          .describe('What is not known of the flight train and could make the class heavier'),
      })
      .describe(
        'Of the flight train as it is planned now: ICAO Annex 2, appendix on unmanned free balloons; local regulation may differ and decides',
      ),
    planChanged: z.boolean().describe('The flight’s plan is no longer the one that this run flew'),
    crossings: z.array(crossingSchema).describe('In the order of flight'),
    notReached: z.object({
      flightLevels: z.array(z.number()),
      altitudesM: z.array(z.number()),
    }),
    extent: z.object({
      distanceM: z.number().describe('From the launch to the farthest point of the track'),
      bearingDeg: z.number(),
      northDeg: latitudeSchema,
      southDeg: latitudeSchema,
      eastDeg: longitudeSchema,
      westDeg: longitudeSchema.describe('Greater than east where it crosses the antimeridian'),
    }),
    cautions: z.array(cautionSchema),
  })
  .meta({ id: 'Notice', description: 'What an airspace authority asks of a predicted flight' })

export type Notice = z.output<typeof noticeSchema>
export type NoticeCrossing = Notice['crossings'][number]
