import { z } from 'zod'
import { idSchema, latitudeSchema, longitudeSchema, timeSchema } from './common.ts'
import { samplingMembers } from './dispersion.ts'
import { flightRequestSchema } from './plan.ts'
import { areasSchema } from './regions.ts'
import { cautionSchema } from './run.ts'

const number = z.number()

/** Most release times of one survey. */
export const MOST_TIMES = 1000

const altitudeRange = z.strictObject({
  atLeast: number.min(0).max(50_000).optional(),
  atMost: number.min(0).max(50_000).optional(),
})

export const limitsSchema = z
  .strictObject({
    landingInside: areasSchema.optional().describe('The landing lies in one of these'),
    landingOutside: areasSchema.optional().describe('The landing lies in none of these'),
    landingDistanceM: z
      .strictObject({
        latitudeDeg: latitudeSchema,
        longitudeDeg: longitudeSchema,
        atLeast: number.min(0).max(2e7).optional(),
        atMost: number.min(0).max(2e7).optional(),
      })
      .optional()
      .describe('Distance of the landing from a point'),
    sunElevationDeg: number
      .min(-90)
      .max(90)
      .optional()
      .describe(
        'The sun stands at least so high at the landing; 0 is before sunset, −6 before civil dusk',
      ),
    burstAltitudeM: altitudeRange.optional(),
    region90Km2: number
      .min(0)
      .max(1e9)
      .optional()
      .describe('Most area that may hold 90 % of the landings'),
    groundWindMs: number.min(0).max(100).optional().describe('Most wind 10 m above the site'),
  })
  .meta({ id: 'WindowLimits', description: 'What a release time must keep to' })

export type LimitsRequest = z.output<typeof limitsSchema>

export const windowsRequestSchema = z
  .strictObject({
    plan: flightRequestSchema.describe('Its launch time and air stand back for those below'),
    from: timeSchema.describe('First release time'),
    to: timeSchema.describe('Last release time'),
    stepMinutes: number.min(1).max(1440).default(60),
    profileIds: z
      .array(idSchema)
      .min(1)
      .max(100)
      .optional()
      .describe('Soundings with different times; the plan’s air unless given'),
    betweenProfiles: z
      .enum(['interpolated', 'nearest'])
      .default('interpolated')
      .describe('What flies at a time between two soundings'),
    limits: limitsSchema.default({}),
    members: z
      .int()
      .min(0)
      .max(5000)
      .optional()
      .describe(
        'Members flown at each time for the region of 90 %; 0, or 256 where that region has a limit, unless given',
      ),
    ...samplingMembers,
  })
  .meta({ id: 'WindowsRequest', description: 'Release times to try, and what they must keep to' })

export type WindowsRequest = z.output<typeof windowsRequestSchema>

const check = z.object({
  limit: z.enum([
    'landingInside',
    'landingOutside',
    'landingDistanceAtLeast',
    'landingDistanceAtMost',
    'sunElevation',
    'burstAltitudeAtLeast',
    'burstAltitudeAtMost',
    'region90',
    'groundWind',
  ]),
  unit: z.enum(['m', 'deg', 'km2', 'm/s']),
  value: number.describe('For areas: how deep inside, negative how far outside'),
  bound: number,
  margin: number.describe('By how much it is kept; negative, failed'),
  kept: z.boolean(),
})

export const windowsAnswerSchema = z
  .object({
    seed: z.int(),
    members: z.int(),
    times: z.array(
      z.object({
        time: timeSchema,
        rank: z.int().describe('1 is the best'),
        passes: z.boolean(),
        air: z.object({
          how: z.enum(['single', 'nearest', 'interpolated']),
          names: z.array(z.string()),
          ageS: number.nullable().describe('Between the release and the nearest air'),
        }),
        notFlyable: z.string().nullable(),
        figures: z
          .object({
            releaseRateMs: number,
            burstAltitudeM: number,
            groundWindMs: number,
            region90Km2: number.nullable(),
            landing: z.object({
              time: timeSchema,
              elapsedS: number,
              latitudeDeg: latitudeSchema,
              longitudeDeg: longitudeSchema,
              distanceM: number.describe('From the launch site'),
              bearingDeg: number,
              speedMs: number,
              sunElevationDeg: number,
            }),
          })
          .nullable(),
        checks: z.array(check),
      }),
    ),
    ranking: z.array(timeSchema).describe('Release times, best first'),
    cautions: z.array(cautionSchema),
  })
  .meta({ id: 'Windows', description: 'Release times against limits' })

export type WindowsAnswer = z.output<typeof windowsAnswerSchema>
