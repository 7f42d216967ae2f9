import { z } from 'zod'
import { flightRequestSchema, planSchema } from './plan.ts'
import { predictionMembers } from './run.ts'

const number = z.number()

const target = z
  .union([
    z.strictObject({ releaseRateMs: number.min(0.1).max(50) }),
    z.strictObject({ meanRateMs: number.min(0.1).max(50) }),
    z.strictObject({ burstAltitudeM: number.min(0).max(50_000) }),
    z.strictObject({ flightTimeS: number.min(1).max(1e6) }),
  ])
  .meta({
    id: 'FillTarget',
    description:
      'One of: rate of ascent at release, mean rate of ascent to the burst, altitude of the burst above mean sea level, time from release to landing',
  })

export type FillTargetRequest = z.output<typeof target>

const cylinder = z
  .strictObject({
    waterVolumeL: number.min(0.1).max(5000).describe('Litres of water that a cylinder holds'),
    pressureBar: number.min(2).max(300).describe('In the full cylinder, absolute'),
    temperatureC: number.min(-40).max(60).default(15).describe('Of the cylinder'),
    leaveBar: number
      .min(0)
      .max(299)
      .default(2)
      .describe('A cylinder is taken off at this pressure, absolute'),
  })
  .refine(({ leaveBar, pressureBar }) => leaveBar < pressureBar, {
    path: ['leaveBar'],
    error: 'must be below pressureBar: the cylinder would give nothing',
  })
  .meta({ id: 'Cylinder', description: 'The cylinders that the gas comes in' })

export type CylinderRequest = z.output<typeof cylinder>

const weighing = z
  .strictObject({
    airTemperatureC: number.min(-60).max(60),
    gasTemperatureC: number.min(-80).max(80).optional().describe('The air’s unless given'),
    pressureHPa: number.min(300).max(1100).optional().describe('The site’s unless given'),
    relativeHumidityPercent: number
      .min(0)
      .max(100)
      .optional()
      .describe('Vapour as at the site unless given'),
  })
  .meta({ id: 'WeighingAir', description: 'Air and gas in which the fill will be weighed' })

export type WeighingRequest = z.output<typeof weighing>

export const fillRequestSchema = flightRequestSchema
  .omit({ neckLiftG: true })
  .extend({ target, cylinder: cylinder.optional(), weighing: weighing.optional() })
  .meta({
    id: 'FillRequest',
    description: 'A flight plan without its neck lift, and what to reach',
  })

export type FillRequest = z.output<typeof fillRequestSchema>

const weighed = z.object({
  place: z.enum(['site', 'warm-hangar', 'cold-gas', 'given']),
  airTemperatureC: number,
  gasTemperatureC: number,
  pressureHPa: number,
  vapourPressureHPa: number,
  readsG: number.describe('What the weigher shows there of this fill'),
  offG: number.describe(
    'Neck lift at the site, once settled, of a fill that showed `neckLiftG` there, less `neckLiftG`',
  ),
})

export const fillAnswerSchema = z
  .object({
    neckLiftG: number,
    plan: planSchema,
    ...predictionMembers,
    tradeOff: z
      .array(
        z.object({
          neckLiftG: number,
          releaseRateMs: number,
          meanRateMs: number,
          burstAltitudeM: number,
          flightTimeS: number,
          volumeM3: number,
          gasMassG: number,
        }),
      )
      .describe('Over the span of neck lifts that fly'),
    cylinders: z
      .object({ count: z.int(), lastLeftBar: number, gasPerCylinderKg: number })
      .optional(),
    weighing: z.array(weighed).describe('What the weigher at the neck shows in which air'),
  })
  .meta({ id: 'Fill', description: 'The fill that meets a target' })

export type FillAnswer = z.output<typeof fillAnswerSchema>
