import { vapourPressure } from '../physics/air.ts'
import { type FlightPlan } from '../physics/flight.ts'
import { columnOf } from '../planning/airRecipe.ts'
import { type AirSource } from '../planning/airSource.ts'
import { cylindersFor } from '../planning/cylinders.ts'
import {
  fillForTarget,
  type FillTarget,
  type TargetKind,
  type TradeOffRow,
} from '../planning/fillForTarget.ts'
import { columnOver, columnsAlong } from '../planning/fieldColumns.ts'
import { type Column } from '../physics/column.ts'
import { predict } from '../planning/prediction.ts'
import { siteAir, weighIn, type Weighing, type WeighingAir } from '../planning/weighing.ts'
import { type Airs } from './airs.ts'
import { toFlightPlan } from './flightPlan.ts'
import { predictionAnswer } from './runAnswer.ts'
import {
  type CylinderRequest,
  type FillRequest,
  type FillTargetRequest,
  type WeighingRequest,
} from './schemas/fill.ts'
import { planOf } from './schemas/plan.ts'
import { GRAMS, HECTOPASCAL, round } from './units.ts'
import { TARGETS } from './unreachableAnswer.ts'

const BAR = 1e5
const LITRE = 1e-3
const ZERO_CELSIUS = 273.15

/** A hall this much warmer than the site, and gas this much colder than the air, stand as examples, K. */
const WARM_HANGAR = 15
const COLD_GAS = 15

/**
 * Finds the fill that a request asks for and flies it.
 * @throws UnreachableTarget, NotFlyable, or Problem where the air is not there
 */
export function fillAnswer(request: FillRequest, airs: Airs) {
  const { target, cylinder, weighing, ...rest } = request
  const unfilled = planOf({ ...rest, neckLiftG: 0 })
  const source = airs.source(unfilled.air)
  const { neckLift, rows, column } = fillIn(source, toFlightPlan(unfilled), toTarget(target))
  const plan = { ...unfilled, neckLiftG: round(neckLift * GRAMS, 3) }
  const flightPlan = toFlightPlan(plan)
  const prediction = predict(flightPlan, source)
  const site = siteAir(flightPlan, column)
  const weigh = (air: WeighingAir) => weighIn(air, flightPlan, column)
  return {
    neckLiftG: plan.neckLiftG,
    plan,
    ...predictionAnswer(prediction, plan),
    tradeOff: rows.map(tradeOffRow),
    ...(cylinder
      ? { cylinders: cylindersAnswer(prediction.flight.fill.gasMass, flightPlan, cylinder) }
      : {}),
    weighing: [
      weighingAnswer('site', weigh(site)),
      weighingAnswer('warm-hangar', weigh(warmed(site, WARM_HANGAR))),
      weighingAnswer('cold-gas', weigh({ ...site, gasTemperature: site.temperature - COLD_GAS })),
      ...(weighing ? [weighingAnswer('given', weigh(givenAir(weighing, site)))] : []),
    ],
  }
}

/** The fill in the air of a source; in a forecast, in the air along the flight that it makes. */
function fillIn(source: AirSource, plan: FlightPlan, target: FillTarget) {
  const filled = (column: Column) => ({ ...fillForTarget(plan, target, column), column })
  if (source.kind !== 'field') return filled(source.column)
  const { neckLift } = filled(columnOf(columnOver(plan.launch, source)))
  return filled(columnOf(columnsAlong({ ...plan, neckLift }, source)))
}

function toTarget(target: FillTargetRequest): FillTarget {
  for (const kind of Object.keys(TARGETS) as TargetKind[]) {
    const value = (target as Record<string, number | undefined>)[TARGETS[kind].member]
    if (value !== undefined) return { kind, value }
  }
  throw new Error('a target without a member passed its schema')
}

function tradeOffRow(row: TradeOffRow) {
  return {
    neckLiftG: round(row.neckLift * GRAMS, 2),
    releaseRateMs: round(row.releaseRate, 3),
    meanRateMs: round(row.meanRate, 3),
    burstAltitudeM: round(row.burstAltitude, 1),
    flightTimeS: round(row.flightTime, 1),
    volumeM3: round(row.volume, 5),
    gasMassG: round(row.gasMass * GRAMS, 2),
  }
}

function cylindersAnswer(gasMass: number, plan: FlightPlan, cylinder: CylinderRequest) {
  const { count, lastLeft, gasPerCylinder } = cylindersFor(gasMass, plan.gas, {
    waterVolume: cylinder.waterVolumeL * LITRE,
    pressure: cylinder.pressureBar * BAR,
    temperature: cylinder.temperatureC + ZERO_CELSIUS,
    leave: cylinder.leaveBar * BAR,
  })
  return {
    count,
    lastLeftBar: round(lastLeft / BAR, 2),
    gasPerCylinderKg: round(gasPerCylinder, 5),
  }
}

function warmed(air: WeighingAir, by: number): WeighingAir {
  return { ...air, temperature: air.temperature + by, gasTemperature: air.gasTemperature + by }
}

function givenAir(given: WeighingRequest, site: WeighingAir): WeighingAir {
  const { airTemperatureC, gasTemperatureC, pressureHPa, relativeHumidityPercent } = given
  const temperature = airTemperatureC + ZERO_CELSIUS
  return {
    temperature,
    gasTemperature: (gasTemperatureC ?? airTemperatureC) + ZERO_CELSIUS,
    pressure: pressureHPa === undefined ? site.pressure : pressureHPa * HECTOPASCAL,
    vapour:
      relativeHumidityPercent === undefined
        ? site.vapour
        : (vapourPressure(temperature) * relativeHumidityPercent) / 100,
  }
}

function weighingAnswer(
  place: 'site' | 'warm-hangar' | 'cold-gas' | 'given',
  { air, reads, off }: Weighing,
) {
  return {
    place,
    airTemperatureC: round(air.temperature - ZERO_CELSIUS, 2),
    gasTemperatureC: round(air.gasTemperature - ZERO_CELSIUS, 2),
    pressureHPa: round(air.pressure / HECTOPASCAL, 2),
    vapourPressureHPa: round(air.vapour / HECTOPASCAL, 3),
    readsG: round(reads * GRAMS, 1),
    offG: round(off * GRAMS, 1),
  }
}
