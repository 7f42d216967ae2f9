import { effect } from '@preact/signals'
import { type DispersionAnswer } from '../../service/schemas/dispersion.ts'
import { kept } from '../kept.ts'
import { draft, trialState } from '../plan/planState.ts'
import { numberReader, requestOf, type Fault } from '../plan/request.ts'
import { areas, areasRequest } from './areas.ts'
import { emptySpread, isSpread, spreadInputs, type SpreadDraft } from './spreadInputs.ts'
import { Work } from './work.ts'

/** How many members can be flown; up to `LIVE` they are flown again at every change. */
export const MEMBERS = [1000, 5000, 20_000, 100_000, 500_000] as const
export const LIVE = 5000

export const members = kept<number>('driftbook.members.1', 1000, (value): value is number =>
  MEMBERS.some((one) => one === value),
)

export const spreadDraft = kept<SpreadDraft>('driftbook.spread.1', emptySpread, isSpread)

/** How sure the plan on the sheet is. */
export const dispersion = new Work<DispersionAnswer>('/v1/trials/dispersion')

/** What is asked for the sheet as it stands, and what in the spreads is no number. */
export function dispersionRequest(): { request: object; faults: Fault[] } {
  const { title: _title, ...plan } = requestOf(draft.value).request
  const { number, faults } = numberReader()
  const spread = Object.fromEntries(
    spreadInputs.map(({ name, one }) => [
      name,
      number(`/spread/${name}`, spreadDraft.value[name], one),
    ]),
  )
  const request = { plan, members: members.value, spread, regions: areasRequest(areas.value) }
  return { request, faults }
}

/** Spreads follow one another while one types: ms after the last. */
const PAUSE = 60

/** Flies the members again at every change from now on; returns what stops that. */
export function keepDispersing(): () => void {
  return effect(() => {
    const { request, faults } = dispersionRequest()
    const { stale, faults: planFaults } = trialState.value
    if (members.value > LIVE) return
    const { asked, answers } = dispersion.state.peek()
    const text = JSON.stringify(request)
    if (text === asked || (text === answers && asked === null)) return
    // A plan that does not fly has no dispersion; one that is being tried has it in a moment.
    if (stale || planFaults.length > 0 || faults.length > 0) dispersion.drop()
    else dispersion.ask(request, PAUSE)
  })
}
