import { z } from 'zod'
import { idSchema, latitudeSchema, longitudeSchema } from './common.ts'
import { flightRequestSchema } from './plan.ts'
import { areasSchema } from './regions.ts'
import { cautionSchema, predictionMembers } from './run.ts'

const number = z.number()

/** Standard deviations, none with a default: those depend on the plan and on the air's age. */
const spreadMembers = {
  neckLiftG: number.min(0).max(50_000),
  balloonMassG: number.min(0).max(5000),
  burstDiameterShare: number.min(0).max(0.5).describe('Of the logarithm of the burst diameter'),
  dragShare: number.min(0).max(1).describe('Of the logarithm of the drag curve’s factor'),
  dragAreaShare: number.min(0).max(1).describe('Of the logarithm of the parachute’s drag area'),
  shareLeftOnLine: number.min(0).max(1).describe('Reflected at 0 and 1'),
  releaseTimeS: number.min(0).max(86_400),
  windMs: number
    .min(0)
    .max(50)
    .describe(
      'Root-mean-square vector error between 1000 and 100 hPa; it grows with height. The default grows with the air’s age',
    ),
}

export const spreadRequestSchema = z
  .strictObject(spreadMembers)
  .partial()
  .meta({ id: 'SpreadRequest', description: 'Standard deviations; 0 switches one off' })

export type SpreadRequest = z.output<typeof spreadRequestSchema>

/** Most members of one dispersion. */
export const MOST_MEMBERS = 500_000

export const samplingMembers = {
  seed: z.int().min(0).max(4_294_967_295).default(1).describe('The same seed, the same answer'),
  spread: spreadRequestSchema.default({}),
}

const dispersionMembers = {
  members: z.int().min(100).max(MOST_MEMBERS).default(1000),
  ...samplingMembers,
  regions: areasSchema.optional().describe('Places to avoid and places wanted'),
}

export const dispersionRequestSchema = z
  .strictObject(dispersionMembers)
  .meta({ id: 'DispersionRequest', description: 'How many members to fly, strewn how' })

export type DispersionRequest = z.output<typeof dispersionRequestSchema>

export const trialDispersionRequestSchema = z
  .strictObject({ plan: flightRequestSchema, ...dispersionMembers })
  .meta({ id: 'TrialDispersionRequest', description: 'A dispersion of a plan that is not stored' })

const quantiles = z.object({ p05: number, p50: number, p95: number })

const feature = z.object({
  type: z.literal('Feature'),
  properties: z.object({ share: number, areaKm2: number }),
  geometry: z.object({
    type: z.literal('MultiPolygon'),
    coordinates: z.array(z.array(z.array(z.array(number)))),
  }),
})

const inputName = z.enum(Object.keys(spreadMembers) as [keyof typeof spreadMembers])

export const dispersionAnswerSchema = z
  .object({
    flightId: idSchema.nullable(),
    members: z.int(),
    seed: z.int(),
    notFlown: z.int().describe('Members that do not fly; they count for nothing below'),
    spread: z.object(spreadMembers),
    spreadSources: z.array(
      z.object({
        input: inputName,
        given: z.boolean().describe('By the request; else the default'),
        source: z.string().describe('Where the default and the distribution come from'),
      }),
    ),
    nominal: z
      .object({ burst: predictionMembers.burst, landing: predictionMembers.landing })
      .describe('The plan flown as it is'),
    burst: z.object({ altitudeM: quantiles }),
    landing: z.object({
      latitudeDeg: latitudeSchema.describe('Of the mean landing place'),
      longitudeDeg: longitudeSchema,
      elapsedS: quantiles.describe('Since the planned release'),
      ellipses: z.array(
        z.object({
          share: number,
          semiMajorM: number,
          semiMinorM: number,
          majorBearingDeg: number,
        }),
      ),
      regionsOfShare: z
        .object({ type: z.literal('FeatureCollection'), features: z.array(feature) })
        .describe(
          'The smallest areas that hold those shares, GeoJSON; empty where all land at one place',
        ),
      points: z
        .array(z.array(number))
        .describe('Longitude and latitude of each flown member’s landing, degrees'),
    }),
    inRegions: z.array(z.object({ name: z.string().nullable(), share: number })),
    causes: z
      .array(z.object({ input: inputName, varianceShare: number }))
      .describe(
        'First-order Sobol indices of the landing place, by regression on Hermite polynomials; what is left to 1 comes from inputs acting together',
      ),
    standardErrorM: number.describe('Of the mean landing place'),
    cautions: z.array(cautionSchema),
  })
  .meta({ id: 'Dispersion', description: 'How sure a prediction is' })

export type DispersionAnswer = z.output<typeof dispersionAnswerSchema>
