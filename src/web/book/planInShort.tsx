import { type Plan } from '../../service/schemas/plan.ts'
import { place } from '../pictures/words.ts'
import { plainNumber, reading } from '../readings.ts'

/** The plan of a flight in a few lines. */
export function PlanInShort({ plan }: { plan: Plan }) {
  const { launch, balloon, gas, neckLiftG, payload, landingAltitudeM } = plan
  const rows = [
    [
      'Site',
      `${place(launch.latitudeDeg, launch.longitudeDeg)}, ${reading('height', launch.altitudeM)}`,
    ],
    [
      'Balloon',
      `${plainNumber(balloon.massG)} g, bursts at ${plainNumber(balloon.ratedBurstDiameterM, 2)} m across`,
    ],
    ['Gas', `${gas.kind}, ${plainNumber(gas.purity * 100, 1)} % pure`],
    ['Neck lift', `${plainNumber(neckLiftG)} g`],
    ['Load', `${plainNumber(payload.massG)} g`],
    ['Parachute', parachuteWords(plan.parachute)],
    ['Lands at', reading('height', landingAltitudeM)],
  ]
  return (
    <section class="sheet" aria-labelledby="plan-in-short">
      <h2 id="plan-in-short">Plan</h2>
      <dl class="pairs">
        {rows.map(([name, value]) => (
          <div key={name}>
            <dt>{name}</dt>
            <dd>{value}</dd>
          </div>
        ))}
      </dl>
    </section>
  )
}

/** A parachute as it was given. */
export function parachuteWords(parachute: Plan['parachute']): string {
  if ('dragAreaM2' in parachute) return `drag area ${plainNumber(parachute.dragAreaM2, 2)} m²`
  if ('diameterM' in parachute) {
    return `${plainNumber(parachute.diameterM, 2)} m across, drag coefficient ${plainNumber(parachute.dragCoefficient, 2)}`
  }
  return `${plainNumber(parachute.seaLevelDescentMs, 1)} m/s at sea level`
}
