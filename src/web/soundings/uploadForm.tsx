import { useState } from 'preact/hooks'
import { useDropping } from '../parts/useDropping.ts'
import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { ServiceProblem } from '../api/client.ts'
import { uploadSoundings, type UploadWords } from './upload.ts'

/** How the last file went. */
type Outcome =
  | { kind: 'reading'; file: string }
  | { kind: 'read'; file: string; profiles: ProfileAnswer[] }
  | { kind: 'refused'; file: string; faults: string[] }

interface UploadFormProps {
  onUploaded: (profiles: ProfileAnswer[]) => void
}

/** Takes files of soundings, chosen or dropped; a name and a time may be given in place of theirs. */
export function UploadForm({ onUploaded }: UploadFormProps) {
  const [words, setWords] = useState<UploadWords>({ name: '', validAt: '' })
  const [outcomes, setOutcomes] = useState<Outcome[]>([])

  const send = async (files: readonly File[]) => {
    setOutcomes(files.map(({ name }) => ({ kind: 'reading', file: name })))
    for (const [index, file] of files.entries()) {
      const outcome = await outcomeOf(file, words)
      setOutcomes((all) => all.map((before, at) => (at === index ? outcome : before)))
      if (outcome.kind === 'read') onUploaded(outcome.profiles)
    }
  }

  const { over, handlers } = useDropping((files) => void send(files))

  return (
    <section class={over ? 'upload over' : 'upload'} aria-labelledby="upload-heading" {...handlers}>
      <h2 id="upload-heading">Add soundings</h2>
      <label class="file">
        <span>Choose a file, or drop it here</span>
        <input
          type="file"
          multiple
          onChange={(event) => {
            const input = event.currentTarget
            void send([...(input.files ?? [])]).then(() => (input.value = ''))
          }}
        />
      </label>
      <p class="hint">
        BUFR, TEMP text, IGRA text, CSV or JSON: the content tells which. A file may hold many.
      </p>
      <div class="words">
        <label>
          <span>Name, if not the file’s own</span>
          <input
            type="text"
            maxLength={200}
            value={words.name}
            onInput={(event) => {
              setWords({ ...words, name: event.currentTarget.value })
            }}
          />
        </label>
        <label>
          <span>Valid at (UTC), if not as the file says</span>
          <input
            type="datetime-local"
            value={words.validAt}
            onInput={(event) => {
              setWords({ ...words, validAt: event.currentTarget.value })
            }}
          />
        </label>
      </div>
      <div role="status">
        {outcomes.map((outcome) => (
          <OutcomeLine key={outcome.file} outcome={outcome} />
        ))}
      </div>
    </section>
  )
}

function OutcomeLine({ outcome }: { outcome: Outcome }) {
  if (outcome.kind === 'reading') return <p>Reading {outcome.file} …</p>
  if (outcome.kind === 'read') {
    const { length } = outcome.profiles
    return (
      <p>
        {outcome.file}: {length === 1 ? 'one sounding' : `${length} soundings`} read.
      </p>
    )
  }
  return (
    <div class="refusal">
      <p>{outcome.file} was not taken.</p>
      <ul>
        {outcome.faults.map((fault) => (
          <li key={fault}>{fault}</li>
        ))}
      </ul>
    </div>
  )
}

async function outcomeOf(file: File, words: UploadWords): Promise<Outcome> {
  try {
    return { kind: 'read', file: file.name, profiles: await uploadSoundings(file, words) }
  } catch (error) {
    return { kind: 'refused', file: file.name, faults: faultsOf(error) }
  }
}

function faultsOf(error: unknown): string[] {
  if (error instanceof ServiceProblem && error.faults.length > 0) {
    return error.faults.map(({ path, message }) => (path === '' ? message : `${path} ${message}`))
  }
  return [error instanceof Error ? error.message : String(error)]
}
