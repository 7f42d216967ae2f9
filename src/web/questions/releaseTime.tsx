import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { compassPoint } from '../compass.ts'
import { distanceWords, durationWords } from '../distances.ts'
import { localClock, utc } from '../parts/moment.ts'
import { change, draft } from '../plan/planState.ts'
import { plainNumber, reading } from '../readings.ts'
import { areaWords } from './areaWords.ts'
import { LIMITS, limitValue, marginWords } from './limitWords.ts'
import { type TriedTime } from './timeStrip.tsx'
import { whenDraft } from './whenState.ts'

/** One release time: its flight, each limit, and the way onto the sheet. */
export function ReleaseTime({ one }: { one: TriedTime }) {
  const { answer } = useAnswer<{ items: ProfileAnswer[] }>('/v1/profiles?limit=200')
  const nearest = nearestSounding(answer?.items ?? [], one.time)
  const minute = new Date(one.time).toISOString().slice(0, 16)
  const { air } = draft.value
  const taken =
    draft.value.releaseTime === minute &&
    (!nearest || (air.kind === 'profile' && air.id === nearest.id))
  return (
    <section class="stack" aria-label="The release time looked at" aria-live="polite">
      <p class="row">
        <strong class="grow">
          {utc(one.time)} · {localClock(one.time)} · number {one.rank}
        </strong>
        <button
          type="button"
          class="main"
          disabled={taken}
          onClick={() => {
            change({
              releaseTime: minute,
              ...(nearest && { air: { kind: 'profile', id: nearest.id } }),
            })
          }}
        >
          {taken ? 'This time is on the sheet' : 'Take this time over'}
        </button>
      </p>
      <p>{airWords(one, nearest)}</p>
      {one.notFlyable && <p class="fault">Does not fly: {one.notFlyable}</p>}
      <Figures one={one} />
      {one.checks.length > 0 && (
        <div class="scrolling" tabIndex={0} role="region" aria-label="Limits at this time">
          <table>
            <thead>
              <tr>
                <th scope="col">Limit</th>
                <th scope="col">There it is</th>
                <th scope="col">So it</th>
              </tr>
            </thead>
            <tbody>
              {one.checks.map((check) => (
                <tr key={check.limit}>
                  <th scope="row">{LIMITS[check.limit]}</th>
                  <td>{limitValue(check)}</td>
                  <td class={check.kept ? '' : 'fault'}>{marginWords(check)}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
    </section>
  )
}

function Figures({ one: { figures } }: { one: TriedTime }) {
  if (!figures) return null
  const { landing, burstAltitudeM, releaseRateMs, groundWindMs, region90Km2 } = figures
  const shown = [
    [
      'Lands',
      `${distanceWords(landing.distanceM)} ${compassPoint(landing.bearingDeg)}, after ${durationWords(landing.elapsedS)}`,
    ],
    ['Landing place', `${landing.latitudeDeg.toFixed(4)}, ${landing.longitudeDeg.toFixed(4)}`],
    ['Bursts at', reading('height', burstAltitudeM)],
    ['Rate at release', reading('verticalSpeed', releaseRateMs, 1)],
    ['Wind at the fill', reading('windSpeed', groundWindMs, 1)],
    ['Sun at landing', `${plainNumber(landing.sunElevationDeg, 1)}°`],
    ...(region90Km2 === null ? [] : [['90 % land within', areaWords(region90Km2)]]),
  ]
  return (
    <dl class="figures">
      {shown.map(([name, value]) => (
        <div key={name}>
          <dt>{name}</dt>
          <dd>{value}</dd>
        </div>
      ))}
    </dl>
  )
}

/** Of the soundings that the times were tried in, the one nearest in time: what the sheet can fly in. */
function nearestSounding(stored: readonly ProfileAnswer[], time: string): ProfileAnswer | null {
  const tried = stored.filter(({ id }) => whenDraft.value.profileIds.includes(id))
  const away = ({ validAt }: ProfileAnswer) =>
    validAt === null ? 0 : Math.abs(Date.parse(validAt) - Date.parse(time))
  return tried.toSorted((a, b) => away(a) - away(b))[0] ?? null
}

function airWords({ air }: TriedTime, nearest: ProfileAnswer | null): string {
  const flown =
    air.how === 'interpolated'
      ? `Flown in air between ${air.names.join(' and ')}.`
      : `Flown in ${air.names.join(', ')}.`
  if (air.how !== 'interpolated' || !nearest) return flown
  return `${flown} The sheet flies in one sounding: taken over, in ${nearest.name}.`
}
