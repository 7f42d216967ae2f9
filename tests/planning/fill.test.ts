import { describe, expect, it } from 'vitest'
import { AIR_MOLAR_MASS } from '../../src/physics/constants.ts'
import { Column } from '../../src/physics/column.ts'
import { fly } from '../../src/physics/flight.ts'
import { NotFlyable } from '../../src/physics/notFlyable.ts'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'
import { cylindersFor } from '../../src/planning/cylinders.ts'
import { fillForTarget, tradeOff, UnreachableTarget } from '../../src/planning/fillForTarget.ts'
import { siteAir, weighIn } from '../../src/planning/weighing.ts'
import { inventedAir, inventedPlan } from './inventedAir.ts'

const column = new Column(inventedAir())

describe('fill for a target', () => {
  it.each([
    [{ kind: 'releaseRate', value: 5 }, 0.001],
    [{ kind: 'meanRate', value: 5.5 }, 0.001],
    [{ kind: 'burstAltitude', value: 29_500 }, 0.5],
    [{ kind: 'flightTime', value: 7200 }, 0.5],
  ] as const)('meets %o within %d', (target, tolerance) => {
    const { neckLift } = fillForTarget(inventedPlan(), target, column)
    const { ascent, burst, landing } = fly(inventedPlan({ neckLift }), column)
    const reached = {
      releaseRate: ascent.releaseRate,
      meanRate: ascent.meanRate,
      burstAltitude: burst.altitude,
      flightTime: landing.elapsed,
    }[target.kind]
    expect(Math.abs(reached - target.value)).toBeLessThan(tolerance)
  })

  it('says what can be reached and what limits it where no neck lift does', () => {
    const target = { kind: 'burstAltitude', value: 45_000 } as const
    try {
      fillForTarget(inventedPlan(), target, column)
      expect.unreachable()
    } catch (error) {
      if (!(error instanceof UnreachableTarget)) throw error
      const { least, most } = error
      expect(most.row.burstAltitude).toBeLessThan(45_000)
      expect(most.row.burstAltitude).toBeGreaterThan(29_500)
      // The span's ends fly, and a hair beyond them nothing does.
      expect(fly(inventedPlan({ neckLift: most.row.neckLift }), column).burst.altitude).toBe(
        most.row.burstAltitude,
      )
      expect(() => fly(inventedPlan({ neckLift: most.row.neckLift - 5e-5 }), column)).toThrow(
        NotFlyable,
      )
      expect(() => fly(inventedPlan({ neckLift: least.row.neckLift + 5e-5 }), column)).toThrow(
        NotFlyable,
      )
    }
  })

  it('trades burst height and time against the rate of ascent', () => {
    const rows = tradeOff(inventedPlan(), column)
    expect(rows.length).toBeGreaterThan(20)
    for (const [i, row] of rows.entries()) {
      if (i === 0) continue
      expect(row.neckLift).toBeGreaterThan(rows[i - 1].neckLift)
      expect(row.releaseRate).toBeGreaterThan(rows[i - 1].releaseRate)
      expect(row.burstAltitude).toBeLessThan(rows[i - 1].burstAltitude)
    }
  })

  it('refuses a plan that no neck lift flies', () => {
    const plan = inventedPlan({
      balloon: { mass: 1, ratedBurstDiameter: 1.2, shareLeftOnLine: 0 },
    })
    expect(() => tradeOff(plan, column)).toThrow(NotFlyable)
  })
})

describe('cylinders', () => {
  const gas = { kind: 'helium', purity: 1, temperatureOffset: 0 } as const
  const cylinder = { waterVolume: 0.05, pressure: 2e7, temperature: 288.15, leave: 2e5 }

  it('hold what real helium at 200 bar holds', () => {
    // 50 L of helium at 200 bar and 15 °C with the published Z of 1.0965 (MODEL's table), less 2 bar ideal.
    const mole = 8.314462618 * 288.15
    const moles = (2e7 * 0.05) / (1.0965 * mole) - (2e5 * 0.05) / mole
    const { gasPerCylinder } = cylindersFor(1, gas, cylinder)
    expect(Math.abs(gasPerCylinder / (moles * 4.002602e-3) - 1)).toBeLessThan(0.002)
  })

  it('leave in the last what the fill did not need', () => {
    const { gasPerCylinder } = cylindersFor(1, gas, cylinder)
    const whole = cylindersFor(2 * gasPerCylinder, gas, cylinder)
    expect(whole.count).toBe(2)
    expect(Math.abs(whole.lastLeft - 2e5)).toBeLessThan(10)
    const little = cylindersFor(2.001 * gasPerCylinder, gas, cylinder)
    expect(little.count).toBe(3)
    expect(little.lastLeft).toBeGreaterThan(1.99e7)
    expect(little.lastLeft).toBeLessThan(2e7)
  })
})

describe('weighing', () => {
  const dry = new Column(standardAir)
  const plan = inventedPlan()

  it('shows the same in dry air of any temperature and pressure once the gas has settled', () => {
    const air = siteAir(plan, dry)
    expect(air.vapour).toBeLessThan(0.01)
    const hangar = { ...air, temperature: 300, gasTemperature: 300, pressure: 90_000 }
    const { reads, off } = weighIn(hangar, plan, dry)
    expect(reads).toBeCloseTo(plan.neckLift, 9)
    expect(off).toBeCloseTo(0, 9)
  })

  it('shows too little while the gas is cold, so that a fill weighed then pulls too much', () => {
    const air = siteAir(plan, dry)
    const { reads, off } = weighIn({ ...air, gasTemperature: air.temperature - 15 }, plan, dry)
    // The displaced air shrinks with the gas: n·M(air)·ΔT/T.
    const { moles } = fly(plan, dry).fill
    expect(reads - plan.neckLift).toBeCloseTo((-moles * AIR_MOLAR_MASS * 15) / air.temperature, 4)
    expect(off).toBeGreaterThan(0.15)
    expect(off).toBeLessThan(0.3)
  })

  it('takes the vapour of the site’s air back out of its density', () => {
    const humid = siteAir(plan, column)
    expect(humid.vapour).toBeGreaterThan(700)
    expect(humid.vapour).toBeLessThan(900)
    expect(weighIn(humid, plan, column).reads).toBeCloseTo(plan.neckLift, 9)
  })
})
