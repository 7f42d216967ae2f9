import { effect } from '@preact/signals'
import { type FillAnswer } from '../../service/schemas/fill.ts'
import { kept } from '../kept.ts'
import { draft } from '../plan/planState.ts'
import { numberReader, requestOf, type Fault } from '../plan/request.ts'
import { Work } from './work.ts'

/** What a fill can be worked out from; what one shown unit is in units of the API. */
export const TARGETS = [
  { member: 'releaseRateMs', label: 'rate at release', unit: 'm/s', one: 1 },
  { member: 'meanRateMs', label: 'mean rate up', unit: 'm/s', one: 1 },
  { member: 'burstAltitudeM', label: 'burst height', unit: 'm', one: 1 },
  { member: 'flightTimeS', label: 'time from release to landing', unit: 'min', one: 60 },
] as const

export type Target = (typeof TARGETS)[number]['member']

/** The question of the gas as it is being typed. */
export interface GasDraft {
  target: Target
  values: Record<Target, string>
  waterVolumeL: string
  pressureBar: string
  temperatureC: string
  leaveBar: string
  hallC: string
  gasC: string
}

const newGasDraft: GasDraft = {
  target: 'releaseRateMs',
  values: { releaseRateMs: '5', meanRateMs: '5', burstAltitudeM: '30000', flightTimeS: '150' },
  waterVolumeL: '',
  pressureBar: '',
  temperatureC: '15',
  leaveBar: '2',
  hallC: '',
  gasC: '',
}

export const gasDraft = kept<GasDraft>('driftbook.gas.1', newGasDraft, isGasDraft)

function isGasDraft(value: unknown): value is GasDraft {
  if (typeof value !== 'object' || value === null) return false
  const old = value as Record<string, unknown>
  const values = old.values as Record<string, unknown> | null | undefined
  return (
    Object.entries(newGasDraft).every(([name, fresh]) => typeof old[name] === typeof fresh) &&
    TARGETS.some(({ member }) => member === old.target) &&
    TARGETS.every(({ member }) => typeof values?.[member] === 'string')
  )
}

/** How much gas reaches what is wanted. */
export const gas = new Work<FillAnswer>('/v1/fills')

/** What is asked for the sheet as it stands, and what keeps it from being asked. */
export function gasRequest(): { request: object; faults: Fault[]; planFaults: Fault[] } {
  const asked = requestOf(draft.value)
  const { title: _title, neckLiftG: _neckLift, ...plan } = asked.request
  const { number, faults } = numberReader()
  const { target, values, ...typed } = gasDraft.value
  const { one } = TARGETS.find(({ member }) => member === target) ?? TARGETS[0]
  const value = number(`/target/${target}`, values[target], one)
  if (value === undefined && faults.length === 0) {
    faults.push({ path: `/target/${target}`, message: 'says what to reach' })
  }
  const cylinder = {
    waterVolumeL: number('/cylinder/waterVolumeL', typed.waterVolumeL),
    pressureBar: number('/cylinder/pressureBar', typed.pressureBar),
    temperatureC: number('/cylinder/temperatureC', typed.temperatureC),
    leaveBar: number('/cylinder/leaveBar', typed.leaveBar),
  }
  const hasCylinder = cylinder.waterVolumeL !== undefined && cylinder.pressureBar !== undefined
  const airTemperatureC = number('/weighing/airTemperatureC', typed.hallC)
  const gasTemperatureC = number('/weighing/gasTemperatureC', typed.gasC)
  return {
    request: {
      ...plan,
      target: { [target]: value },
      ...(hasCylinder && { cylinder }),
      ...(airTemperatureC !== undefined && { weighing: { airTemperatureC, gasTemperatureC } }),
    },
    faults,
    planFaults: asked.faults.filter(({ path }) => path !== '/neckLiftG'),
  }
}

/** A fill flies the plan some fifty times: ms after the last key. */
const PAUSE = 120

/** Asks again at every change from now on; returns what stops that. */
export function keepFilling(): () => void {
  return effect(() => {
    const { request, faults, planFaults } = gasRequest()
    const { asked, answers, faults: refused } = gas.state.peek()
    const text = JSON.stringify(request)
    if (text === asked || (text === answers && asked === null && refused.length === 0)) return
    if (faults.length > 0 || planFaults.length > 0) gas.drop()
    else gas.ask(request, PAUSE)
  })
}
