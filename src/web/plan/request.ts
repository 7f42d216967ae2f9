import { type PlanDraft } from './draft.ts'

/** Something wrong in a draft, and at which member of the request. */
export interface Fault {
  path: string
  message: string
}

type TrainDraft = Pick<PlanDraft, 'packages' | 'lineStrengthN'>
type ReadNumber = (path: string, text: string, scale?: number) => number | undefined

/** Reads numbers from their text, and gathers what is none. */
export function numberReader(): { number: ReadNumber; faults: Fault[] } {
  const faults: Fault[] = []
  const number: ReadNumber = (path, text, scale = 1) => {
    if (text.trim() === '') return undefined
    const value = Number(text.trim().replace(',', '.'))
    if (Number.isFinite(value)) return Number((value * scale).toPrecision(15))
    faults.push({ path, message: `“${text}” is no number` })
    return undefined
  }
  return { number, faults }
}

/** The change of a stored flight that says how its load is made up, and what is no number in it. */
export function trainChange(train: TrainDraft): { change: object; faults: Fault[] } {
  const { number, faults } = numberReader()
  return { change: { payload: { packages: [], ...trainOf(train, number) } }, faults }
}

/**
 * The request that a draft makes, and what is no number in it. Members left empty are left out, so that
 * the service says what is missing and fills in what has a default.
 */
export function requestOf(draft: PlanDraft): { request: Record<string, unknown>; faults: Fault[] } {
  const { number, faults } = numberReader()
  const time = new Date(`${draft.releaseTime}Z`)
  const request = {
    ...(draft.title.trim() && { title: draft.title.trim() }),
    launch: {
      latitudeDeg: number('/launch/latitudeDeg', draft.latitudeDeg),
      longitudeDeg: number('/launch/longitudeDeg', draft.longitudeDeg),
      altitudeM: number('/launch/altitudeM', draft.siteAltitudeM),
      time: Number.isNaN(time.getTime()) ? undefined : time.toISOString(),
    },
    balloon: {
      massG: number('/balloon/massG', draft.balloonMassG),
      ratedBurstDiameterM: number('/balloon/ratedBurstDiameterM', draft.ratedBurstDiameterM),
      shareLeftOnLine: number('/balloon/shareLeftOnLine', draft.sharePercent, 0.01),
    },
    gas: {
      kind: draft.gasKind,
      purity: number('/gas/purity', draft.purityPercent, 0.01),
      temperatureOffsetK: number('/gas/temperatureOffsetK', draft.gasWarmerK),
    },
    neckLiftG: number('/neckLiftG', draft.neckLiftG),
    payload: {
      massG: number('/payload/massG', draft.payloadMassG),
      ...trainOf(draft, number),
    },
    parachute: parachuteOf(draft, number),
    drag:
      draft.dragCurve === 'constant'
        ? { curve: draft.dragCurve, coefficient: number('/drag/coefficient', draft.constantDrag) }
        : { curve: draft.dragCurve },
    landingAltitudeM: number('/landingAltitudeM', draft.landingAltitudeM),
    air: draft.air,
  }
  return { request, faults }
}

/** How the load is made up, as far as somebody said. */
function trainOf({ packages, lineStrengthN }: TrainDraft, number: ReadNumber) {
  return {
    ...(packages.length > 0 && {
      packages: packages.map(({ name, massG, smallestFaceCm2 }, index) => ({
        name,
        massG: number(`/payload/packages/${index}/massG`, massG),
        smallestFaceCm2: number(`/payload/packages/${index}/smallestFaceCm2`, smallestFaceCm2),
      })),
    }),
    lineStrengthN: number('/payload/lineStrengthN', lineStrengthN),
  }
}

function parachuteOf(draft: PlanDraft, number: ReadNumber): Record<string, number | undefined> {
  switch (draft.parachuteBy) {
    case 'area':
      return { dragAreaM2: number('/parachute/dragAreaM2', draft.dragAreaM2) }
    case 'size':
      return {
        diameterM: number('/parachute/diameterM', draft.parachuteDiameterM),
        dragCoefficient: number('/parachute/dragCoefficient', draft.parachuteDragCoefficient),
      }
    case 'speed':
      return { seaLevelDescentMs: number('/parachute/seaLevelDescentMs', draft.seaLevelDescentMs) }
  }
}
