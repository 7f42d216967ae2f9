import { useEffect } from 'preact/hooks'
import { useLocation } from 'wouter-preact'
import { type Flight } from '../../service/schemas/flight.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { Fault } from '../parts/fault.tsx'
import { draftOf } from './draft.ts'
import { draft } from './planState.ts'

/** Takes the plan of a stored flight over to the plan sheet. */
export function PlanFrom({ flightId }: { flightId: string }) {
  const { answer, error } = useAnswer<Flight>(`/v1/flights/${flightId}`)
  const [, go] = useLocation()
  useEffect(() => {
    if (!answer) return
    draft.value = draftOf(answer.title, answer.plan)
    go('/', { replace: true })
  }, [answer, go])
  return error ? <Fault error={error} /> : <p class="waiting">Opening the plan …</p>
}
