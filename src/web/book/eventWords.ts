import { type FlightEvent } from '../../service/schemas/event.ts'
import { reading } from '../readings.ts'
import { shiftWords } from './shiftWords.ts'

/** An event that the list of runs does not tell already. */
export type ToldEvent = Exclude<FlightEvent, { kind: 'run-stored' }>

/** What happened to a flight’s prediction, as one would say it. */
export function eventWords(event: ToldEvent): string {
  switch (event.kind) {
    case 'landing-moved':
      return `The landing moved more than ${reading('distance', event.tellBeyondM, 1)} since it was last told: ${shiftWords(event.moved)}.`
    case 'rerun-failed':
      return `It cannot be flown in newer air: ${event.problem.detail}`
  }
}
