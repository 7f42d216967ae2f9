import { useEffect, useState } from 'preact/hooks'
import { v7 as uuid } from 'uuid'
import { Link } from 'wouter-preact'
import { type Flight } from '../../service/schemas/flight.ts'
import { call } from '../api/client.ts'
import { Fault } from '../parts/fault.tsx'
import { change, draft, trialState } from './planState.ts'
import { requestOf } from './request.ts'

/** Keeps the plan as a flight in the book. */
export function StoreFlight() {
  const [stored, setStored] = useState<Flight | null>(null)
  const [error, setError] = useState<Error | null>(null)
  // One key for one plan: pressed twice, or sent again after a lost answer, it is stored once.
  const [key, setKey] = useState(() => uuid())
  useEffect(() => {
    setKey(uuid())
    setStored(null)
    setError(null)
  }, [draft.value])

  const store = async () => {
    setError(null)
    try {
      const { request } = requestOf(draft.value)
      const headers = { 'idempotency-key': key }
      const { flight } = await call<{ flight: Flight }>('POST', '/v1/flights', request, { headers })
      setStored(flight)
    } catch (failure) {
      setError(failure as Error)
    }
  }

  return (
    <form
      class="sheet row"
      aria-label="Store the flight"
      onSubmit={(event) => {
        event.preventDefault()
        void store()
      }}
    >
      <div class="field grow">
        <label for="plan-title">Title in the book</label>
        <input
          id="plan-title"
          value={draft.value.title}
          maxLength={200}
          placeholder="Untitled flight"
          onInput={({ currentTarget }) => {
            change({ title: currentTarget.value })
          }}
        />
      </div>
      <button class="main" disabled={trialState.value.faults.length > 0 || stored !== null}>
        Store this flight
      </button>
      <p role="status">
        {stored && (
          <>
            Stored. <Link href={`/book/${stored.id}`}>Open it in the book</Link>
          </>
        )}
      </p>
      <Fault error={error} />
    </form>
  )
}
