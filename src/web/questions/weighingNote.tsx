import { type FillAnswer } from '../../service/schemas/fill.ts'
import { plainNumber } from '../readings.ts'

type Weighed = FillAnswer['weighing'][number]

const PLACES: Record<Weighed['place'], string> = {
  site: 'in the air of the site',
  'warm-hangar': 'in a warm hangar',
  'cold-gas': 'with gas still cold from the cylinder',
  given: 'in the air you gave',
}

/** What the weigher at the neck shows of this fill, and how far off a fill weighed elsewhere is. */
export function WeighingNote({ answer }: { answer: FillAnswer }) {
  return (
    <section aria-labelledby="weighing-heading">
      <h3 id="weighing-heading">At the weigher</h3>
      <ul class="spans">
        {answer.weighing.map((weighed) => (
          <li key={weighed.place}>
            {PLACES[weighed.place]} ({degreesOf(weighed)}) this fill shows{' '}
            <strong>{plainNumber(weighed.readsG)} g</strong>
            {Math.abs(weighed.offG) >= 0.5 &&
              `; filled until it shows ${plainNumber(answer.neckLiftG)} g there, the balloon lifts ${plainNumber(Math.abs(weighed.offG))} g too ${weighed.offG > 0 ? 'much' : 'little'} at the site`}
          </li>
        ))}
      </ul>
    </section>
  )
}

function degreesOf({ airTemperatureC, gasTemperatureC }: Weighed): string {
  const air = `${plainNumber(airTemperatureC)} °C`
  if (Math.abs(airTemperatureC - gasTemperatureC) < 0.05) return air
  return `air ${air}, gas ${plainNumber(gasTemperatureC)} °C`
}
