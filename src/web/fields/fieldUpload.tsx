import { useState } from 'preact/hooks'
import { useDropping } from '../parts/useDropping.ts'
import { type FieldAnswer } from '../../service/schemas/field.ts'
import { uploadField } from './sendField.ts'

type Sending =
  | { kind: 'sending'; file: string; share: number }
  | { kind: 'refused'; file: string; message: string }

/** Takes a forecast file, chosen or dropped, and tells how far it has got. */
export function FieldUpload({ onUploaded }: { onUploaded: (field: FieldAnswer) => void }) {
  const [sending, setSending] = useState<Sending | null>(null)

  const send = async (file: File | undefined) => {
    if (!file) return
    const { name } = file
    setSending({ kind: 'sending', file: name, share: 0 })
    try {
      const field = await uploadField(file, (share) => {
        setSending({ kind: 'sending', file: name, share })
      })
      setSending(null)
      onUploaded(field)
    } catch (error) {
      const message = error instanceof Error ? error.message : String(error)
      setSending({ kind: 'refused', file: name, message })
    }
  }

  const { over, handlers } = useDropping(([file]) => void send(file))

  return (
    <section class={over ? 'upload over' : 'upload'} aria-labelledby="upload-heading" {...handlers}>
      <h2 id="upload-heading">Add a forecast</h2>
      <label class="file">
        <span>Choose a GRIB file, or drop it here</span>
        <input
          type="file"
          onChange={(event) => {
            const input = event.currentTarget
            void send(input.files?.[0]).then(() => (input.value = ''))
          }}
        />
      </label>
      <p class="hint">
        GRIB edition 2 on pressure levels: height, temperature and wind, up to 2 GiB.
      </p>
      <div role="status">
        {sending?.kind === 'refused' && (
          <p class="refusal">
            {sending.file} was not taken: {sending.message}
          </p>
        )}
        {sending?.kind === 'sending' && (
          <p>{sending.share < 1 ? `Sending ${sending.file} …` : `Reading ${sending.file} …`}</p>
        )}
      </div>
      {sending?.kind === 'sending' && (
        <progress aria-label={`Sent of ${sending.file}`} max={1} value={sending.share} />
      )}
    </section>
  )
}
