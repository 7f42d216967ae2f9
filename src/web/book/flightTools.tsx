import { useRef, useState } from 'preact/hooks'
import { Link, useLocation } from 'wouter-preact'
import { type Flight } from '../../service/schemas/flight.ts'
import { call } from '../api/client.ts'
import { Fault } from '../parts/fault.tsx'

/** What can be done with a flight as a whole: plan again from it, rename it, delete it. */
export function FlightTools({ flight, onChanged }: { flight: Flight; onChanged: () => void }) {
  const renaming = useRef<HTMLDialogElement>(null)
  const deleting = useRef<HTMLDialogElement>(null)
  const [title, setTitle] = useState(flight.title)
  const [error, setError] = useState<Error | null>(null)
  const [, go] = useLocation()
  const path = `/v1/flights/${flight.id}`

  const attempt = async (work: () => Promise<void>) => {
    setError(null)
    try {
      await work()
    } catch (failure) {
      setError(failure as Error)
    }
  }
  const rename = () =>
    attempt(async () => {
      await call('PATCH', path, { title })
      renaming.current?.close()
      onChanged()
    })
  const remove = () =>
    attempt(async () => {
      await call('DELETE', path)
      go('/book')
    })

  return (
    <div class="row">
      <Link class="button" href={`/plan/${flight.id}`}>
        Plan again from this
      </Link>
      <button type="button" onClick={() => renaming.current?.showModal()}>
        Rename
      </button>
      <button type="button" onClick={() => deleting.current?.showModal()}>
        Delete
      </button>
      <dialog ref={renaming} aria-labelledby="rename">
        <form
          class="stack"
          onSubmit={(event) => {
            event.preventDefault()
            void rename()
          }}
        >
          <h2 id="rename">Rename the flight</h2>
          <div class="field">
            <label for="new-title">Title</label>
            <input
              id="new-title"
              value={title}
              required
              maxLength={200}
              onInput={({ currentTarget }) => {
                setTitle(currentTarget.value)
              }}
            />
          </div>
          <Fault error={error} />
          <div class="row">
            <button class="main">Keep</button>
            <button type="button" onClick={() => renaming.current?.close()}>
              Leave it
            </button>
          </div>
        </form>
      </dialog>
      <dialog ref={deleting} aria-labelledby="delete">
        <div class="stack">
          <h2 id="delete">Delete this flight?</h2>
          <p>
            {flight.title} goes with{' '}
            {flight.runCount === 1 ? 'its run' : `all ${flight.runCount} runs`}. It cannot be
            brought back.
          </p>
          <Fault error={error} />
          <div class="row">
            <button type="button" onClick={() => void remove()}>
              Delete
            </button>
            <button type="button" class="main" onClick={() => deleting.current?.close()}>
              Keep it
            </button>
          </div>
        </div>
      </dialog>
    </div>
  )
}
