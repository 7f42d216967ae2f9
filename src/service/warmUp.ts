import { dragCurve } from '../physics/dragCurves.ts'
import { standardSource } from '../planning/airSource.ts'
import { type PlanningPool } from '../planning/pool.ts'
import { defaultSpread } from '../planning/spread.ts'
import { toFlightPlan } from './flightPlan.ts'
import { flightRequestSchema, planOf } from './schemas/plan.ts'

/** Flies an invented plan, so that the first dispersion that somebody asks for is as fast as the next. */
export async function warmUp(pool: PlanningPool): Promise<void> {
  // This curve makes a table of itself at its first use.
  dragCurve({ curve: 'smooth-sphere' }).reynolds(1e9)
  const request = flightRequestSchema.parse({
    launch: { latitudeDeg: 0, longitudeDeg: 0, altitudeM: 0, time: '2026-01-01T00:00:00Z' },
    balloon: { massG: 1000, ratedBurstDiameterM: 7.5 },
    gas: { kind: 'helium' },
    neckLiftG: 2200,
    payload: { massG: 1200 },
    parachute: { dragAreaM2: 0.8 },
  })
  const plan = toFlightPlan(planOf(request))
  await pool.warmUp({
    plan,
    air: standardSource.recipe,
    spread: defaultSpread(plan, null),
    members: 0,
    seed: 1,
    regions: [],
  })
}
