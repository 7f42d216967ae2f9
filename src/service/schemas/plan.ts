import { z } from 'zod'
import { idSchema, latitudeSchema, longitudeSchema, timeSchema } from './common.ts'

/** Every schema here is strict: a misspelt member is refused, never ignored. */

export const airSchema = z
  .discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('standard') }),
    z.strictObject({ kind: z.literal('profile'), id: idSchema }),
    z.strictObject({
      kind: z.literal('field'),
      id: idSchema,
      outside: z
        .enum(['refuse', 'hold'])
        .default('refuse')
        .describe('Beyond the forecast’s grid and times: refused, or the nearest air held'),
    }),
  ])
  .meta({
    id: 'Air',
    description:
      'The standard atmosphere without wind, an uploaded sounding, or an uploaded forecast',
  })

export const parachuteSchema = z
  .union([
    z.strictObject({
      dragAreaM2: z.number().min(1e-4).max(1000).describe('Cd·A, m²'),
    }),
    z.strictObject({
      diameterM: z.number().min(0.05).max(50).describe('Nominal diameter, m'),
      dragCoefficient: z.number().min(0.05).max(5).describe('On the nominal area'),
    }),
    z.strictObject({
      seaLevelDescentMs: z
        .number()
        .min(0.2)
        .max(100)
        .describe('Speed at which it lands this load at sea level, m/s'),
    }),
  ])
  .meta({ id: 'Parachute', description: 'One of drag area, size, or descent speed' })

export const dragSchema = z
  .discriminatedUnion('curve', [
    z.strictObject({ curve: z.literal('sounding-balloon') }),
    z.strictObject({ curve: z.literal('smooth-sphere') }),
    z.strictObject({ curve: z.literal('constant'), coefficient: z.number().min(0.01).max(5) }),
  ])
  .meta({ id: 'Drag', description: 'Drag curve of the ascending balloon' })

const siteAltitude = z.number().min(-500).max(9000)

export const launchSchema = z.strictObject({
  latitudeDeg: latitudeSchema,
  longitudeDeg: longitudeSchema,
  altitudeM: siteAltitude.describe('Geometric metres above mean sea level'),
  time: timeSchema.describe('Release'),
})

/** All numbers of a balloon, none with a default. */
export const balloonMembers = {
  massG: z.number().min(1).max(50_000),
  ratedBurstDiameterM: z.number().min(0.05).max(50),
  shareLeftOnLine: z
    .number()
    .min(0)
    .max(1)
    .describe('Share of the balloon’s mass that stays on the line after burst'),
}

/** All numbers of a gas, none with a default. */
export const gasMembers = {
  kind: z.enum(['helium', 'hydrogen']),
  purity: z.number().min(0.5).max(1).describe('Mole fraction; the rest is air'),
  temperatureOffsetK: z
    .number()
    .min(-50)
    .max(60)
    .describe('How much warmer the gas is in flight than the air around it'),
}

const packageSchema = z
  .strictObject({
    name: z.string().trim().min(1).max(100),
    massG: z.number().min(1).max(200_000),
    smallestFaceCm2: z
      .number()
      .min(0.1)
      .max(1e6)
      .optional()
      .describe('Area of its smallest face, cm²'),
  })
  .meta({ id: 'Package', description: 'One package of the flight train' })

export const payloadSchema = z.strictObject({
  massG: z
    .number()
    .min(1)
    .max(200_000)
    .describe('Everything hung below the neck: instruments, line, parachute'),
  packages: z
    .array(packageSchema)
    .max(50)
    .optional()
    .describe('The single packages on the line, for the class of the balloon'),
  lineStrengthN: z
    .number()
    .min(1)
    .max(1e6)
    .optional()
    .describe('Force at which the suspension parts, newtons'),
})

export const neckLiftSchema = z
  .number()
  .min(0)
  .max(500_000)
  .describe('Pull at the neck of the filled balloon with nothing hung on it, grams-force')

export const landingAltitudeSchema = siteAltitude.describe('Where the descent ends')

/** The members of a flight plan with their defaults. */
const planMembers = {
  launch: launchSchema,
  balloon: z.strictObject({
    ...balloonMembers,
    shareLeftOnLine: balloonMembers.shareLeftOnLine.default(0),
  }),
  gas: z.strictObject({
    ...gasMembers,
    purity: gasMembers.purity.default(1),
    temperatureOffsetK: gasMembers.temperatureOffsetK.default(0),
  }),
  neckLiftG: neckLiftSchema,
  payload: payloadSchema,
  parachute: parachuteSchema,
  drag: dragSchema.default({ curve: 'sounding-balloon' }),
  air: airSchema.default({ kind: 'standard' }),
}

export const titleSchema = z.string().trim().min(1).max(200)

export const flightRequestSchema = z
  .strictObject({
    title: titleSchema.default('Untitled flight'),
    ...planMembers,
    landingAltitudeM: landingAltitudeSchema
      .optional()
      .describe('Where the descent ends; the launch site’s altitude unless given'),
  })
  .meta({ id: 'FlightRequest', description: 'A planned flight' })

export type FlightRequest = z.output<typeof flightRequestSchema>

/** A plan with every default filled in: what a run flew. */
export const planSchema = z
  .strictObject({ ...planMembers, landingAltitudeM: landingAltitudeSchema })
  .meta({ id: 'Plan', description: 'A flight plan with every default filled in' })

export type Plan = z.output<typeof planSchema>
export type AirReference = Plan['air']

/** The plan of a request, its landing altitude filled in. */
export function planOf(request: FlightRequest): Plan {
  const { title: _title, landingAltitudeM, air, ...plan } = request
  return { ...plan, landingAltitudeM: landingAltitudeM ?? plan.launch.altitudeM, air }
}
