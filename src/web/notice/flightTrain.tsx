import { type Plan } from '../../service/schemas/plan.ts'
import { type Run } from '../../service/schemas/run.ts'
import { parachuteWords } from '../book/planInShort.tsx'
import { plainNumber } from '../readings.ts'

/** What goes up: as the run flew it, its load taken apart as the flight's plan has it now. */
export function FlightTrain({ run, payload }: { run: Run; payload: Plan['payload'] }) {
  const { balloon, gas, parachute } = run.plan
  const { packages = [], lineStrengthN } = payload
  const named = packages.reduce((sum, { massG }) => sum + massG, 0)
  return (
    <>
      balloon {grams(balloon.massG)}, {gas.kind} {grams(run.fill.gasMassG)}, load{' '}
      {grams(run.plan.payload.massG)} under a parachute ({parachuteWords(parachute)})
      {lineStrengthN !== undefined && `; the line parts at ${plainNumber(lineStrengthN)} N`}
      {packages.map(({ name, massG, smallestFaceCm2 }, index) => (
        <span key={index} class="package-line">
          {name}: {grams(massG)}
          {smallestFaceCm2 !== undefined && `, smallest face ${plainNumber(smallestFaceCm2)} cm²`}
        </span>
      ))}
      {packages.length > 0 && named !== run.plan.payload.massG && (
        <span class="package-line">
          The packages make {grams(named)} of the load of {grams(run.plan.payload.massG)}.
        </span>
      )}
    </>
  )
}

function grams(value: number): string {
  return `${plainNumber(value)} g`
}
