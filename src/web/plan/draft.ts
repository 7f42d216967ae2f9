import { type AirReference, type Plan } from '../../service/schemas/plan.ts'

/** One package as it is being typed. */
export interface PackageDraft {
  name: string
  massG: string
  smallestFaceCm2: string
}

/** A plan as it is being typed: numbers as their text, times in UTC to the minute. */
export interface PlanDraft {
  title: string
  latitudeDeg: string
  longitudeDeg: string
  siteAltitudeM: string
  releaseTime: string
  landingAltitudeM: string
  balloonMassG: string
  ratedBurstDiameterM: string
  sharePercent: string
  gasKind: 'helium' | 'hydrogen'
  purityPercent: string
  gasWarmerK: string
  neckLiftG: string
  payloadMassG: string
  packages: PackageDraft[]
  lineStrengthN: string
  parachuteBy: 'size' | 'area' | 'speed'
  parachuteDiameterM: string
  parachuteDragCoefficient: string
  dragAreaM2: string
  seaLevelDescentMs: string
  dragCurve: 'sounding-balloon' | 'smooth-sphere' | 'constant'
  constantDrag: string
  air: AirReference
}

/** A plan that flies: an invented site, release tomorrow at nine. */
export function newDraft(now = new Date()): PlanDraft {
  const tomorrow = new Date(now.getTime() + 86_400_000).toISOString().slice(0, 10)
  return {
    title: '',
    latitudeDeg: '47.31',
    longitudeDeg: '9.12',
    siteAltitudeM: '615',
    releaseTime: `${tomorrow}T09:00`,
    landingAltitudeM: '',
    balloonMassG: '1200',
    ratedBurstDiameterM: '8.6',
    sharePercent: '0',
    gasKind: 'helium',
    purityPercent: '100',
    gasWarmerK: '0',
    neckLiftG: '2750',
    payloadMassG: '1600',
    packages: [],
    lineStrengthN: '',
    parachuteBy: 'size',
    parachuteDiameterM: '1.3',
    parachuteDragCoefficient: '0.75',
    dragAreaM2: '1',
    seaLevelDescentMs: '5',
    dragCurve: 'sounding-balloon',
    constantDrag: '0.3',
    air: { kind: 'standard' },
  }
}

/** The draft of a stored plan. */
export function draftOf(title: string, plan: Plan): PlanDraft {
  const { launch, balloon, gas, payload, parachute, drag } = plan
  const draft: PlanDraft = {
    ...newDraft(),
    title,
    latitudeDeg: String(launch.latitudeDeg),
    longitudeDeg: String(launch.longitudeDeg),
    siteAltitudeM: String(launch.altitudeM),
    releaseTime: new Date(launch.time).toISOString().slice(0, 16),
    landingAltitudeM: String(plan.landingAltitudeM),
    balloonMassG: String(balloon.massG),
    ratedBurstDiameterM: String(balloon.ratedBurstDiameterM),
    sharePercent: percent(balloon.shareLeftOnLine),
    gasKind: gas.kind,
    purityPercent: percent(gas.purity),
    gasWarmerK: String(gas.temperatureOffsetK),
    neckLiftG: String(plan.neckLiftG),
    payloadMassG: String(payload.massG),
    packages: (payload.packages ?? []).map(({ name, massG, smallestFaceCm2 }) => ({
      name,
      massG: String(massG),
      smallestFaceCm2: smallestFaceCm2 === undefined ? '' : String(smallestFaceCm2),
    })),
    lineStrengthN: payload.lineStrengthN === undefined ? '' : String(payload.lineStrengthN),
    dragCurve: drag.curve,
    air: plan.air,
  }
  if (drag.curve === 'constant') draft.constantDrag = String(drag.coefficient)
  if ('dragAreaM2' in parachute) {
    return { ...draft, parachuteBy: 'area', dragAreaM2: String(parachute.dragAreaM2) }
  }
  if ('diameterM' in parachute) {
    return {
      ...draft,
      parachuteDiameterM: String(parachute.diameterM),
      parachuteDragCoefficient: String(parachute.dragCoefficient),
    }
  }
  return {
    ...draft,
    parachuteBy: 'speed',
    seaLevelDescentMs: String(parachute.seaLevelDescentMs),
  }
}

function percent(share: number): string {
  return String(Number((share * 100).toFixed(6)))
}

/** Whether what was kept is a draft of this form. */
export function isDraft(value: unknown): value is PlanDraft {
  if (typeof value !== 'object' || value === null) return false
  const fresh = newDraft() as unknown as Record<string, unknown>
  const old = value as Record<string, unknown>
  return (
    Object.keys(fresh).every((name) => typeof old[name] === typeof fresh[name]) &&
    Array.isArray(old.packages)
  )
}
