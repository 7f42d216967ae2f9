import { v7 as uuid } from 'uuid'
import { type Store } from '../store/store.ts'
import { type WatchRow } from '../store/watches.ts'
import { runInShort, storedRun } from './flightAnswer.ts'
import { now, type FlownRun } from './flying.ts'
import { problemBody } from './problems.ts'
import { shiftBetween } from './runAnswer.ts'
import { type FlightEvent } from './schemas/event.ts'
import { type AirReference } from './schemas/plan.ts'
import { type Run } from './schemas/run.ts'

type Without<Event, Member extends string> = Event extends unknown ? Omit<Event, Member> : never

/** Stores a flown run with the events that it gives rise to; call it inside a transaction. */
export function keepRun(store: Store, { run, row }: FlownRun): void {
  store.runs.insert(row)
  const watch = store.watches.get(run.flightId)
  const inShort = runInShort(run)
  keepEvent(store, watch, { kind: 'run-stored', flightId: run.flightId, run: inShort })
  if (!watch) return
  const told = store.runs.answer(watch.toldRunId)
  const moved = told === undefined ? null : shiftBetween(run, storedRun(told))
  if (!moved || moved.landingDistanceM <= watch.tellBeyond) return
  store.watches.told(run.flightId, run.id)
  keepEvent(store, watch, {
    kind: 'landing-moved',
    flightId: run.flightId,
    run: inShort,
    tellBeyondM: watch.tellBeyond,
    moved,
  })
}

/** Stores that a flight cannot be flown again in newer air; call it inside a transaction. */
export function keepFailure(
  store: Store,
  watch: WatchRow,
  air: AirReference,
  error: unknown,
): void {
  const { flightId } = watch
  keepEvent(store, watch, { kind: 'rerun-failed', flightId, air, problem: problemBody(error) })
}

function keepEvent(
  store: Store,
  watch: WatchRow | undefined,
  happened: Without<FlightEvent, 'id' | 'at'>,
): void {
  const id = uuid()
  const { flightId, kind } = happened
  const event = { id, at: now(), ...happened }
  store.events.insert({ id, flightId, kind, answer: JSON.stringify(event) })
  if (webhookKinds(watch).includes(kind)) {
    const dueAt = Date.now() / 1000
    store.deliveries.insert({ eventId: id, flightId, attempts: 0, dueAt, complaint: null })
  }
}

/** The kinds of event that a watch's webhook wants; none where it has no webhook. */
export function webhookKinds(watch: WatchRow | undefined): FlightEvent['kind'][] {
  return JSON.parse(watch?.webhookKinds ?? '[]') as FlightEvent['kind'][]
}

/** The run whose landing counts as told when a watch begins. */
export function toldFirst(latest: Run, earlier: WatchRow | undefined): string {
  return earlier?.toldRunId ?? latest.id
}
