import { Link } from 'wouter-preact'
import { type Flight } from '../../service/schemas/flight.ts'
import { fromSite } from '../distances.ts'
import { utc } from '../parts/moment.ts'
import { place } from '../pictures/words.ts'
import { reading } from '../readings.ts'
import { shiftWords } from './shiftWords.ts'

interface FlightRowProps {
  flight: Flight
  chosen: boolean
  onChoose: (yes: boolean) => void
}

/** One stored flight with what its newest run says. */
export function FlightRow({ flight, chosen, onChoose }: FlightRowProps) {
  const { id, title, plan, runCount, latestRun, outcome } = flight
  const { burst, landing, air, shift } = latestRun
  return (
    <li class="flight-row sheet">
      <input
        type="checkbox"
        aria-label={`Choose ${title}`}
        checked={chosen}
        onChange={({ currentTarget }) => {
          onChoose(currentTarget.checked)
        }}
      />
      <div>
        <h2>
          <Link href={`/book/${id}`}>{title}</Link>
        </h2>
        <p>
          Release {utc(plan.launch.time)}. Burst at {reading('height', burst.altitudeM)}; lands{' '}
          {fromSite(landing.distanceM, landing.bearingDeg)}, at{' '}
          {place(landing.latitudeDeg, landing.longitudeDeg)}, {utc(landing.time)}.
        </p>
        <p class="quiet">
          {runCount === 1 ? '1 run' : `${runCount} runs`}, the newest in {air.name}:{' '}
          {shiftWords(shift)}.{outcome && ' What happened is noted.'}
        </p>
      </div>
    </li>
  )
}
