import { useEffect, useRef, useState } from 'preact/hooks'
import { type FlightEvent } from '../../service/schemas/event.ts'
import { call } from '../api/client.ts'

const KINDS = ['run-stored', 'landing-moved', 'rerun-failed'] satisfies FlightEvent['kind'][]

/**
 * What happened to a flight’s prediction, newest first; while `live`, also what happens from now on, told
 * by `onEvent` too.
 */
export function useEvents(flightId: string, live: boolean, onEvent: () => void): FlightEvent[] {
  const [events, setEvents] = useState<FlightEvent[]>([])
  const told = useRef(onEvent)
  told.current = onEvent
  useEffect(() => {
    const stop = new AbortController()
    const path = `/v1/flights/${flightId}/events`
    const read = () => {
      const headers = { accept: 'application/json' }
      const { signal } = stop
      call<{ items: FlightEvent[] }>('GET', path, undefined, { headers, signal })
        .then(({ items }) => {
          setEvents(items)
        })
        .catch(() => undefined) // the list of runs says that the service is away
    }
    read()
    const source = live ? new EventSource(path) : null
    const renew = () => {
      read()
      told.current()
    }
    // What happened between the first reading and the open stream is told by neither: read again then.
    source?.addEventListener('open', renew)
    for (const kind of KINDS) source?.addEventListener(kind, renew)
    return () => {
      stop.abort()
      source?.close()
    }
  }, [flightId, live])
  return events
}
