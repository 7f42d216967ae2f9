import { type ComponentChildren } from 'preact'
import { type Run, type Trial } from '../../service/schemas/run.ts'
import { AT_THE_SITE, durationWords, fromSite } from '../distances.ts'
import { localClock, utc } from '../parts/moment.ts'
import { plainNumber, reading } from '../readings.ts'
import { Cautions } from './cautions.tsx'
import { CopyButton } from './copyButton.tsx'
import { degreesMinutes } from './degreesMinutes.ts'
import './answer.css'

/** What a prediction says, as a launch director reads it. */
export function Answer({ run }: { run: Run | Trial }) {
  const { fill, ascent, burst, descent, landing } = run
  const decimal = `${landing.latitudeDeg.toFixed(5)}, ${landing.longitudeDeg.toFixed(5)}`
  return (
    <div class="answer stack">
      <dl class="heads">
        <Head name="Bursts at" value={reading('height', burst.altitudeM)}>
          {utc(burst.time)} · {localClock(burst.time)}
        </Head>
        <Head name="Lands" value={fromSite(landing.distanceM, landing.bearingDeg)}>
          {landing.distanceM < AT_THE_SITE
            ? 'as far as it can be told'
            : `bearing ${String(Math.round(landing.bearingDeg) % 360).padStart(3, '0')}° from the site`}
        </Head>
        <Head name="On the ground" value={durationWords(landing.elapsedS)}>
          after release: {utc(landing.time)} · {localClock(landing.time)}
        </Head>
      </dl>
      <section aria-label="Landing place">
        <h3>Landing place</h3>
        <p>
          <CopyButton text={decimal} what="the landing place in decimal degrees" />
        </p>
        <p>
          <CopyButton
            text={degreesMinutes(landing.latitudeDeg, landing.longitudeDeg)}
            what="the landing place in degrees and minutes"
          />
        </p>
      </section>
      <dl class="figures">
        <Figure name="Rate at release" value={reading('verticalSpeed', ascent.releaseRateMs, 1)} />
        <Figure name="Mean rate up" value={reading('verticalSpeed', ascent.meanRateMs, 1)} />
        <Figure name="Ascent" value={durationWords(ascent.durationS)} />
        <Figure name="Descent" value={durationWords(descent.durationS)} />
        <Figure name="Speed at landing" value={reading('verticalSpeed', landing.speedMs, 1)} />
        <Figure name="Free lift" value={`${plainNumber(fill.freeLiftG)} g`} />
        <Figure name="Gross lift" value={`${plainNumber(fill.grossLiftG)} g`} />
        <Figure name="Gas to fill in" value={`${plainNumber(fill.volumeM3, 2)} m³`} />
        <Figure name="Gas mass" value={`${plainNumber(fill.gasMassG)} g`} />
        <Figure name="Filled diameter" value={`${plainNumber(fill.diameterM, 2)} m`} />
      </dl>
      <Cautions cautions={run.cautions} />
    </div>
  )
}

function Head(props: { name: string; value: string; children: ComponentChildren }) {
  return (
    <div>
      <dt>{props.name}</dt>
      <dd class="large">{props.value}</dd>
      <dd class="quiet">{props.children}</dd>
    </div>
  )
}

function Figure({ name, value }: { name: string; value: string }) {
  return (
    <div>
      <dt>{name}</dt>
      <dd>{value}</dd>
    </div>
  )
}
