import { useState } from 'preact/hooks'
import { call } from '../api/client.ts'

interface DeleteSoundingProps {
  id: string
  onDeleted: () => void
}

/** Deletes a sounding after a second word; one that runs were flown in stays, and why is said. */
export function DeleteSounding({ id, onDeleted }: DeleteSoundingProps) {
  const [asking, setAsking] = useState(false)
  const [kept, setKept] = useState<string | null>(null)

  const remove = async () => {
    setAsking(false)
    try {
      await call('DELETE', `/v1/profiles/${encodeURIComponent(id)}`)
      onDeleted()
    } catch (error) {
      setKept(error instanceof Error ? error.message : String(error))
    }
  }

  return (
    <div class="delete">
      {asking ? (
        <>
          <p id="delete-question">Delete this sounding for good?</p>
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
          Delete this sounding
        </button>
      )}
      <div role="status">{kept !== null && <p class="refusal">Not deleted. {kept}</p>}</div>
    </div>
  )
}
