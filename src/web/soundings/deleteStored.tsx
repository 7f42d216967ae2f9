import { useState } from 'preact/hooks'
import { call } from '../api/client.ts'

interface DeleteStoredProps {
  what: 'sounding' | 'forecast'
  path: string
  onDeleted: () => void
}

/** Deletes a sounding or forecast after a second word; one that runs were flown in stays, and why is said. */
export function DeleteStored({ what, path, onDeleted }: DeleteStoredProps) {
  const [asking, setAsking] = useState(false)
  const [kept, setKept] = useState<string | null>(null)

  const remove = async () => {
    setAsking(false)
    try {
      await call('DELETE', path)
      onDeleted()
    } catch (error) {
      setKept(error instanceof Error ? error.message : String(error))
    }
  }

  return (
    <div class="delete">
      {asking ? (
        <>
          <p id="delete-question">Delete this {what} for good?</p>
          <button type="button" aria-describedby="delete-question" onClick={() => void remove()}>
            Delete it
          </button>
          <button
            type="button"
            onClick={() => {
              setAsking(false)
            }}
          >
            Keep it
          </button>
        </>
      ) : (
        <button
          type="button"
          onClick={() => {
            setAsking(true)
            setKept(null)
          }}
        >
          Delete this {what}
        </button>
      )}
      <div role="status">{kept !== null && <p class="refusal">Not deleted. {kept}</p>}</div>
    </div>
  )
}
