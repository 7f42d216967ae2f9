import { effect, signal } from '@preact/signals'
import { type Trial } from '../../service/schemas/run.ts'
import { call, ServiceAway, ServiceProblem } from '../api/client.ts'
import { kept } from '../kept.ts'
import { isDraft, newDraft, type PlanDraft } from './draft.ts'
import { requestOf, type Fault } from './request.ts'

/** The plan being typed; it survives a reload. */
export const draft = kept<PlanDraft>('driftbook.plan.1', newDraft(), isDraft)

/** What the service says of the plan. */
export interface TrialState {
  /** The newest prediction; the old one stays until the new one is there */
  trial: Trial | null
  /** Why the plan as it stands does not fly; empty where it does */
  faults: readonly Fault[]
  /** The prediction shown is not yet, or not, that of the plan as it stands */
  stale: boolean
  /** The service does not answer */
  away: boolean
}

export const trialState = signal<TrialState>({ trial: null, faults: [], stale: true, away: false })

/** Changes members of the plan being typed. */
export function change(changes: Partial<PlanDraft>): void {
  draft.value = { ...draft.value, ...changes }
}

/** Typing is not interrupted by a question for each key: ms after the last. */
const PAUSE = 40
/** How long after an unanswered question it is asked again, ms. */
const RETRY = 2000

let asking: AbortController | undefined
let timer: ReturnType<typeof setTimeout> | undefined

/** Asks for a prediction whenever the plan changes, from now on; returns what stops that. */
export function keepPredicting(): () => void {
  const stop = effect(() => {
    const { request, faults } = requestOf(draft.value)
    const { trial, away } = trialState.peek()
    trialState.value = { trial, faults, stale: true, away }
    asking?.abort()
    clearTimeout(timer)
    if (faults.length === 0) timer = setTimeout(() => void ask(request), PAUSE)
  })
  return () => {
    stop()
    asking?.abort()
    clearTimeout(timer)
  }
}

async function ask(request: Record<string, unknown>): Promise<void> {
  const mine = (asking = new AbortController())
  try {
    const trial = await call<Trial>('POST', '/v1/trials?track=true', request, {
      signal: mine.signal,
    })
    trialState.value = { trial, faults: [], stale: false, away: false }
  } catch (error) {
    if (mine.signal.aborted) return
    const { trial } = trialState.value
    if (error instanceof ServiceProblem) {
      trialState.value = { trial, faults: faultsOf(error), stale: true, away: false }
    } else {
      const away = error instanceof ServiceAway
      trialState.value = { trial, faults: [], stale: true, away }
      if (away) timer = setTimeout(() => void ask(request), RETRY)
    }
  }
}

/** What a problem says of the plan. */
export function faultsOf(problem: ServiceProblem): readonly Fault[] {
  return problem.faults.length > 0 ? problem.faults : [{ path: '', message: problem.message }]
}
