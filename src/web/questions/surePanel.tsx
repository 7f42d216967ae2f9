import { useEffect } from 'preact/hooks'
import { type DispersionAnswer } from '../../service/schemas/dispersion.ts'
import { compassPoint } from '../compass.ts'
import { distanceWords, durationWords } from '../distances.ts'
import { Choice } from '../plan/choice.tsx'
import { plainNumber, reading } from '../readings.ts'
import { areas } from './areas.ts'
import { areaWords } from './areaWords.ts'
import {
  dispersion,
  dispersionRequest,
  keepDispersing,
  LIVE,
  members,
  MEMBERS,
} from './dispersionState.ts'
import { JobBar } from './jobBar.tsx'
import { SpreadTable } from './spreadTable.tsx'

/** How sure the prediction is: many flights with what is uncertain about them strewn. */
export function SurePanel() {
  useEffect(() => {
    if (members.peek() > LIVE) dispersion.resume()
    return keepDispersing()
  }, [])
  const { answer, answers, asked, faults } = dispersion.state.value
  const { request, faults: typed } = dispersionRequest()
  const current = JSON.stringify(request) === answers
  const others = faults.filter(({ path }) => !path.startsWith('/spread'))
  return (
    <div class="stack">
      <div class="row">
        <Choice
          id="sure-members"
          label="Flights to strew"
          value={String(members.value)}
          options={MEMBERS.map((count) => [
            String(count),
            `${plainNumber(count)}${count <= LIVE ? ', at every change' : ''}`,
          ])}
          onChoose={(count) => {
            members.value = Number(count)
          }}
        />
        {members.value > LIVE && (
          <button
            type="button"
            class="main"
            disabled={asked !== null || current || typed.length > 0}
            onClick={() => {
              dispersion.ask(request)
            }}
          >
            Fly {plainNumber(members.value)}
          </button>
        )}
      </div>
      <JobBar work={dispersion} />
      {others.map(({ path, message }) => (
        <p key={path} class="fault" role="alert">
          {message}
        </p>
      ))}
      {answer && (
        <section aria-label="Where it may land" aria-busy={!current}>
          {!current && <p class="stale-note">Of the plan as it was before.</p>}
          <Spans answer={answer} />
        </section>
      )}
      <SpreadTable answer={answer} faults={[...typed, ...faults]} />
    </div>
  )
}

function Spans({ answer }: { answer: DispersionAnswer }) {
  const { burst, landing, nominal, inRegions, members: flown, notFlown, standardErrorM } = answer
  const height = (metres: number) => reading('height', metres)
  const widest = landing.ellipses.find(({ share }) => share === 0.9)
  const planned = nominal.landing.elapsedS
  return (
    <ul class="spans">
      {landing.regionsOfShare.features.map(({ properties: { share, areaKm2 } }) => (
        <li key={share}>
          <strong>{plainNumber(share * 100)} %</strong> land within an area of{' '}
          <strong>{areaWords(areaKm2)}</strong>
          {share === 0.9 && widest && widest.semiMinorM > 0 && (
            <>
              {' '}
              (about {distanceWords(2 * widest.semiMajorM)} by{' '}
              {distanceWords(2 * widest.semiMinorM)}, lengthwise{' '}
              {compassPoint(widest.majorBearingDeg)})
            </>
          )}
        </li>
      ))}
      <li>
        Nine in ten burst between <strong>{height(burst.altitudeM.p05)}</strong> and{' '}
        <strong>{height(burst.altitudeM.p95)}</strong>, half of all above{' '}
        {height(burst.altitudeM.p50)}; the plan says {height(nominal.burst.altitudeM)}
      </li>
      <li>
        Nine in ten are on the ground between <strong>{durationWords(landing.elapsedS.p05)}</strong>{' '}
        and <strong>{durationWords(landing.elapsedS.p95)}</strong> after the planned release; the
        plan says {durationWords(planned)}
      </li>
      {inRegions.map(({ name, share }, index) => (
        <li key={index}>
          <strong>{plainNumber(share * 100, 1)} %</strong> land in “{name}”
          {areas.value[index] && (areas.value[index].wanted ? ', wanted' : ', to avoid')}
        </li>
      ))}
      <li class="quiet">
        From {plainNumber(flown)} flights
        {notFlown > 0 && `, of which ${plainNumber(notFlown)} did not fly`}; their mean landing
        place is known to {reading('height', standardErrorM)}.
      </li>
    </ul>
  )
}
