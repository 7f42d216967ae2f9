import { useEffect, useState } from 'preact/hooks'
import { type Run } from '../../service/schemas/run.ts'
import { call } from '../api/client.ts'
import { utc } from '../parts/moment.ts'
import { type ShownRun, type TrackRow } from '../pictures/shownRun.ts'

/** The runs with their tracks, as they arrive; the one with `firstId` comes first. Tracks never change. */
export function useShownRuns(runs: readonly Run[], firstId: string | undefined): ShownRun[] {
  const [tracks, setTracks] = useState<ReadonlyMap<string, TrackRow[]>>(new Map())
  const missing = runs.filter(({ id }) => !tracks.has(id)).map(({ id }) => id)
  useEffect(() => {
    for (const id of missing) {
      void call<{ points: TrackRow[] }>('GET', `/v1/runs/${id}/track`)
        .then(({ points }) => {
          setTracks((before) => new Map(before).set(id, points))
        })
        .catch(() => undefined) // the list of runs says that the service is away
    }
  }, [missing.join()])
  return runs
    .toSorted((one, other) => Number(other.id === firstId) - Number(one.id === firstId))
    .flatMap((run) => {
      const track = tracks.get(run.id)
      if (!track) return []
      return [{ key: run.id, label: `${run.air.name}, run of ${utc(run.createdAt)}`, run, track }]
    })
}
