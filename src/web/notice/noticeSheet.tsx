import { type ComponentChildren } from 'preact'
import { type Notice } from '../../service/schemas/notice.ts'
import { type Plan } from '../../service/schemas/plan.ts'
import { type Run } from '../../service/schemas/run.ts'
import { degreesMinutes } from '../answer/degreesMinutes.ts'
import { compassPoint } from '../compass.ts'
import { distanceWords, durationWords } from '../distances.ts'
import { localWithZone, utc } from '../parts/moment.ts'
import { place } from '../pictures/words.ts'
import { reading } from '../readings.ts'
import { FlightTrain } from './flightTrain.tsx'
import { Passages } from './passages.tsx'

interface NoticeSheetProps {
  run: Run
  notice: Notice
  /** The flight's plan as it stands: how the load is made up */
  plan: Plan
}

/** One page for the airspace authority and the crew. */
export function NoticeSheet({ run, notice, plan }: NoticeSheetProps) {
  const { launch } = run.plan
  const { landing, burst } = run
  const { extent } = notice
  return (
    <article class="notice sheet">
      <h1>Planned flight of an unmanned free balloon: {notice.title}</h1>
      <p class="law">
        Airspace notification follows local regulation; the competent authority decides. This sheet
        tells a prediction and is no permission.
      </p>
      {notice.planChanged && (
        <p class="caution">
          The flight’s plan was changed after this run: fly it again before you hand this sheet on.
        </p>
      )}
      <dl class="notice-pairs">
        <Pair name="Release">
          {utc(launch.time)} ({localWithZone(launch.time)})
        </Pair>
        <Pair name="Site">
          {place(launch.latitudeDeg, launch.longitudeDeg, 5)};{' '}
          {degreesMinutes(launch.latitudeDeg, launch.longitudeDeg)};{' '}
          {reading('height', launch.altitudeM)} above sea level
        </Pair>
        <Pair name="Burst">
          {reading('height', burst.altitudeM)}, {utc(burst.time)},{' '}
          {place(burst.latitudeDeg, burst.longitudeDeg)}
        </Pair>
        <Pair name="Landing">
          {place(landing.latitudeDeg, landing.longitudeDeg, 5)};{' '}
          {degreesMinutes(landing.latitudeDeg, landing.longitudeDeg)}; {utc(landing.time)} (
          {localWithZone(landing.time)}), {durationWords(landing.elapsedS)} after release, at{' '}
          {reading('verticalSpeed', landing.speedMs, 1)}
        </Pair>
        <Pair name="Greatest extent">
          {distanceWords(extent.distanceM)} {compassPoint(extent.bearingDeg)} of the site; all of it
          between {place(extent.southDeg, extent.westDeg, 3)} and{' '}
          {place(extent.northDeg, extent.eastDeg, 3)}
        </Pair>
        <Pair name="Air">
          {run.air.name}
          {run.air.validAt && `, valid ${utc(run.air.validAt)}`}; predicted {utc(run.createdAt)}
        </Pair>
        <Pair name="Flight train">
          <FlightTrain run={run} payload={plan.payload} />
        </Pair>
        <Pair name="Class">
          <strong>{notice.balloonClass.name}</strong> by ICAO Annex 2, as{' '}
          {notice.balloonClass.reasons.join('; ')}.
          {notice.balloonClass.missing.length > 0 && (
            <strong>
              {' '}
              Not known, and could make it heavier: {notice.balloonClass.missing.join(', ')}.
            </strong>
          )}{' '}
          Packages and line are those of the flight’s plan as it stands now.
        </Pair>
      </dl>
      <Passages notice={notice} />
      <h2>Heed</h2>
      <ul class="notice-cautions">
        {run.cautions.map(({ code, message }) => (
          <li key={code}>{message}</li>
        ))}
        <li>
          Gas cylinders are under high pressure; lines, payloads and burst balloons come down near
          people and power lines.{' '}
          {run.plan.gas.kind === 'hydrogen' && 'Hydrogen burns and explodes in mixtures with air. '}
          Local codes and licensed practice decide.
        </li>
      </ul>
    </article>
  )
}

function Pair({ name, children }: { name: string; children: ComponentChildren }) {
  return (
    <div>
      <dt>{name}</dt>
      <dd>{children}</dd>
    </div>
  )
}
