import { useEffect, useState } from 'preact/hooks'
import { type ColumnLevel, type FieldAnswer } from '../../service/schemas/field.ts'
import { type Flight } from '../../service/schemas/flight.ts'
import { call, ServiceProblem } from '../api/client.ts'
import { LevelsTable } from '../soundings/levelsTable.tsx'
import { SoundingPicture } from '../soundings/soundingPicture.tsx'
import { utc } from '../soundings/words.ts'
import { columnLevels } from './columnLevels.ts'

export interface Spot {
  latitudeDeg: number
  longitudeDeg: number
}

/** Between two moments of the slider, s. */
const STEP = 1800

/** How long a moving slider is waited for, ms. */
const REST = 60

interface WindOverSpotProps {
  field: FieldAnswer
  onSpot: (spot: Spot | null) => void
}

/** The forecast's wind over a flight's site, at the time that a slider gives. */
export function WindOverSpot({ field, onSpot }: WindOverSpotProps) {
  const [flights, setFlights] = useState<Flight[]>([])
  const [flightId, setFlightId] = useState('')
  const [first, last] = spanOf(field)
  const [time, setTime] = useState(first)
  const [levels, setLevels] = useState<ColumnLevel[] | null>(null)
  const [trouble, setTrouble] = useState<string | null>(null)
  const launch = flights.find(({ id }) => id === flightId)?.plan.launch

  useEffect(() => {
    call<{ items: Flight[] }>('GET', '/v1/flights?limit=50').then(({ items }) => {
      setFlights(items)
      choose(items.at(0))
    }, showTrouble)
  }, [])

  const choose = (flight: Flight | undefined) => {
    setFlightId(flight?.id ?? '')
    if (!flight) return
    const release = Date.parse(flight.plan.launch.time) / 1000
    setTime(Math.min(last, Math.max(first, release)))
    onSpot(flight.plan.launch)
  }
  const showTrouble = (error: unknown) => {
    setLevels(null)
    const fault = error instanceof ServiceProblem ? error.faults.at(0) : undefined
    setTrouble(
      fault
        ? `The forecast ${fault.message}.`
        : error instanceof Error
          ? error.message
          : String(error),
    )
  }

  useEffect(() => {
    if (!launch) return
    const asking = new AbortController()
    const timer = setTimeout(() => {
      const { latitudeDeg, longitudeDeg } = launch
      const query = `latitudeDeg=${latitudeDeg}&longitudeDeg=${longitudeDeg}&time=${isoTime(time)}`
      call<{ levels: ColumnLevel[] }>(
        'GET',
        `/v1/fields/${field.id}/column?${query}&format=json`,
        undefined,
        { signal: asking.signal },
      ).then(
        (column) => {
          setLevels(column.levels)
          setTrouble(null)
        },
        (error: unknown) => {
          if (!asking.signal.aborted) showTrouble(error)
        },
      )
    }, REST)
    return () => {
      clearTimeout(timer)
      asking.abort()
    }
  }, [launch, time])

  const shown = levels && columnLevels(levels)
  return (
    <section class="over-spot" aria-labelledby="over-heading">
      <h3 id="over-heading">Wind over a flight’s site</h3>
      {flights.length === 0 && <p>Store a flight to see the wind over its site.</p>}
      <label>
        <span>Flight</span>
        <select
          value={flightId}
          onChange={(event) => {
            choose(flights.find(({ id }) => id === event.currentTarget.value))
          }}
        >
          {flights.map(({ id, title, plan }) => (
            <option key={id} value={id}>
              {title}, {utc(plan.launch.time)}
            </option>
          ))}
        </select>
      </label>
      <label>
        <span>Time: {utc(isoTime(time))}</span>
        <input
          type="range"
          min={first}
          max={last}
          step={STEP}
          value={time}
          disabled={first === last}
          aria-valuetext={utc(isoTime(time))}
          onInput={(event) => {
            setTime(Number(event.currentTarget.value))
          }}
        />
      </label>
      {launch && outside(launch.time, first, last) && (
        <p class="hint">The release, {utc(launch.time)}, lies outside this forecast’s times.</p>
      )}
      <div role="status">{trouble !== null && <p class="refusal">{trouble}</p>}</div>
      {shown && (
        <>
          <SoundingPicture levels={shown} />
          <LevelsTable levels={shown} />
        </>
      )}
    </section>
  )
}

function spanOf({ validTimes }: FieldAnswer): [number, number] {
  const seconds = validTimes.map((time) => Date.parse(time) / 1000)
  return [Math.min(...seconds), Math.max(...seconds)]
}

function outside(time: string, first: number, last: number): boolean {
  const seconds = Date.parse(time) / 1000
  return seconds < first || seconds > last
}

function isoTime(seconds: number): string {
  return `${new Date(seconds * 1000).toISOString().slice(0, 19)}Z`
}
