import { Column } from '../../src/physics/column.ts'
import { type ColumnAir } from '../../src/physics/air.ts'
import { fly } from '../../src/physics/flight.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'
import { geodesicLine } from '../../src/planning/geodesic.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { standardFlight } from '../physics/plans.ts'
import { fixture } from '../service/harness.ts'

const ROUNDS = 5
const FLIGHTS = 10_000

/** Whole flights a second on one core in one column of air, and how far halved slabs move the landing. */
export function benchFlights(): void {
  console.log('Whole flights in one column of air, one core')
  const [norman] = readSoundings(fixture('sounding-norman-2023-05-22.csv'), {})
  report('standard atmosphere', standardAir)
  report('real sounding, 256 levels', new ProfileAir(norman.levels))
  console.log()
}

function report(name: string, air: ColumnAir): void {
  const plan = standardFlight()
  const column = new Column(air)
  const rates: number[] = []
  for (let round = 0; round < ROUNDS; round++) {
    const start = performance.now()
    for (let i = 0; i < FLIGHTS; i++) fly(plan, column)
    rates.push((FLIGHTS / (performance.now() - start)) * 1000)
  }
  const half = fly(plan, new Column(air, column.thickness / 2))
  const moved = geodesicLine(fly(plan, column).landing, half.landing).distance
  const median = rates.sort((a, b) => a - b)[Math.floor(ROUNDS / 2)]
  console.log(
    `  ${name.padEnd(28)} ${Math.round(median).toLocaleString('en')} flights/s; halved slabs move the landing by ${moved.toFixed(2)} m`,
  )
}
