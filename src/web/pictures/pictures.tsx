import type { Polygon } from 'geojson'
import { lazy, Suspense } from 'preact/compat'
import { useRef } from 'preact/hooks'
import { type DispersionAnswer } from '../../service/schemas/dispersion.ts'
import { HeightPicture } from './heightPicture.tsx'
import { Legend } from './legend.tsx'
import { Readout } from './readout.tsx'
import { type ShownArea } from './shownArea.ts'
import { type ShownRun } from './shownRun.ts'
import { WindPicture } from './windPicture.tsx'
import './pictures.css'

const FlightMap = lazy(() => import('../map/flightMap.tsx').then((room) => room.FlightMap))

export interface PicturesProps {
  /** The first is the one that is read at the cursor; at least one */
  runs: ShownRun[]
  /** Where the members of a dispersion land */
  cloud?: DispersionAnswer | null
  /** Places to avoid and places wanted */
  areas?: ShownArea[]
  /** Offers the drawing of an area, and takes the drawn one: longitudes may run on past 180° */
  onAreaDrawn?: (polygon: Polygon) => void
}

/** Track, height and wind of one run or several, linked by the moment that one points at. */
export function Pictures(props: PicturesProps) {
  const runs = useSame(props.runs)
  if (runs.length === 0) return null
  const heights = heightsOf(runs)
  return (
    <section class="pictures" aria-label="Pictures of the flight">
      <div class="pictures-sheet">
        <Readout track={runs[0].track} />
        <figure class="of-map">
          <figcaption>Ground track</figcaption>
          <Suspense fallback={<p class="waiting">Opening the map …</p>}>
            <FlightMap {...props} runs={runs} />
          </Suspense>
        </figure>
        <figure class="of-height">
          <figcaption>Height against time</figcaption>
          <HeightPicture runs={runs} heights={heights} />
        </figure>
        <figure class="of-wind">
          <figcaption>
            Wind against height <small>arrows point where it blows to, north is up</small>
          </figcaption>
          <WindPicture runs={runs} heights={heights} />
        </figure>
        <Legend runs={runs} />
      </div>
    </section>
  )
}

/** The runs that can be drawn; the same array for as long as the same runs are shown, so that nothing is drawn twice. */
function useSame(runs: readonly ShownRun[]): ShownRun[] {
  const kept = useRef<ShownRun[]>([])
  const drawable = runs.filter(({ track }) => track.length > 1)
  const same =
    drawable.length === kept.current.length &&
    drawable.every(({ key, label, track }, index) => {
      const before = kept.current[index]
      return key === before.key && label === before.label && track === before.track
    })
  if (!same) kept.current = drawable
  return kept.current
}

/** From the lowest to the highest of all runs, m: height and wind share it and can be read across. */
function heightsOf(runs: readonly ShownRun[]): [number, number] {
  const bottom = Math.min(
    ...runs.map(({ run }) => Math.min(run.plan.launch.altitudeM, run.landing.altitudeM)),
  )
  const top = Math.max(...runs.map(({ run }) => run.burst.altitudeM))
  const room = 0.05 * (top - bottom)
  return [bottom - room, top + room]
}
