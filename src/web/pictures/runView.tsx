import { useEffect, useState } from 'preact/hooks'
import { Link } from 'wouter-preact'
import { type Flight } from '../../service/schemas/flight.ts'
import { type Run } from '../../service/schemas/run.ts'
import { call } from '../api/client.ts'
import { Pictures } from './pictures.tsx'
import { type ShownRun, type TrackRow } from './shownRun.ts'
import { clock, place } from './words.ts'

interface Opened {
  title: string
  shown: ShownRun
}

/** One stored run in pictures, on a page with an address of its own to hand to the crew. */
export function RunView({ runId }: { runId: string }) {
  const [opened, setOpened] = useState<Opened | null>(null)
  const [trouble, setTrouble] = useState<string | null>(null)
  useEffect(() => {
    open(runId).then(setOpened, (error: unknown) => {
      setTrouble(error instanceof Error ? error.message : String(error))
    })
  }, [runId])

  if (trouble !== null) return <p role="alert">{trouble}</p>
  if (!opened) return <p class="waiting">Opening …</p>
  const { title, shown } = opened
  const { landing, burst, air } = shown.run
  return (
    <div>
      <h1>{title}</h1>
      <p>
        Flown in {air.name}. Bursts {clock(burst.elapsedS, false)} after release, lands at{' '}
        {place(landing.latitudeDeg, landing.longitudeDeg)} at {landing.time.slice(11, 16)} UTC.{' '}
        <Link href={`/notice/${runId}`}>Notice sheet</Link>
      </p>
      <Pictures runs={[shown]} />
    </div>
  )
}

async function open(runId: string): Promise<Opened> {
  const path = `/v1/runs/${encodeURIComponent(runId)}`
  const [run, track] = await Promise.all([
    call<Run>('GET', path),
    call<{ points: TrackRow[] }>('GET', `${path}/track?format=json`),
  ])
  const { title } = await call<Flight>('GET', `/v1/flights/${run.flightId}`)
  return {
    title,
    shown: { key: runId, label: run.air.name, run, track: track.points },
  }
}
