import { useEffect, useRef, useState } from 'preact/hooks'
import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { call } from '../api/client.ts'
import { levelsOf } from '../pictures/levels.ts'
import { type Level } from '../pictures/windColumn.ts'
import { place } from '../pictures/words.ts'
import { DeleteStored } from './deleteStored.tsx'
import { LevelsTable } from './levelsTable.tsx'
import { SoundingPicture } from './soundingPicture.tsx'
import { span, utc, validity } from './words.ts'

interface SoundingSheetProps {
  id: string
  onDeleted: () => void
}

/** One sounding: what it holds, what was done to it on the way in, its picture and its levels. */
export function SoundingSheet({ id, onDeleted }: SoundingSheetProps) {
  const [sounding, setSounding] = useState<ProfileAnswer | null>(null)
  const [levels, setLevels] = useState<Level[] | null>(null)
  const [trouble, setTrouble] = useState<string | null>(null)
  useEffect(() => {
    const failed = (error: unknown) => {
      setTrouble(error instanceof Error ? error.message : String(error))
    }
    call<ProfileAnswer>('GET', `/v1/profiles/${encodeURIComponent(id)}`).then(setSounding, failed)
    levelsOf(encodeURIComponent(id)).then(setLevels, failed)
  }, [id])

  // Whoever chose it reads on here, also where it lies below the list.
  const heading = useRef<HTMLHeadingElement>(null)
  useEffect(() => heading.current?.focus(), [sounding])

  if (trouble !== null) return <p role="alert">{trouble}</p>
  if (!sounding) return <p class="waiting">Opening …</p>
  const { latitudeDeg, longitudeDeg } = sounding
  return (
    <article class="sounding" aria-labelledby="sounding-heading">
      <h2 id="sounding-heading" ref={heading} tabIndex={-1}>
        {sounding.name}
      </h2>
      <dl>
        <div>
          <dt>Valid</dt>
          <dd>{validity(sounding)}</dd>
        </div>
        <div>
          <dt>Place</dt>
          <dd>
            {latitudeDeg === null || longitudeDeg === null
              ? 'not told'
              : place(latitudeDeg, longitudeDeg, 2)}
          </dd>
        </div>
        <div>
          <dt>Temperature</dt>
          <dd>{span(sounding.temperature)}</dd>
        </div>
        <div>
          <dt>Wind</dt>
          <dd>{span(sounding.wind)}</dd>
        </div>
        <div>
          <dt>Added</dt>
          <dd>{utc(sounding.createdAt)}</dd>
        </div>
      </dl>
      <Notes notes={sounding.notes} />
      {levels && (
        <>
          <SoundingPicture levels={levels} />
          <LevelsTable levels={levels} />
        </>
      )}
      <DeleteStored
        what="sounding"
        path={`/v1/profiles/${encodeURIComponent(id)}`}
        onDeleted={onDeleted}
      />
    </article>
  )
}

function Notes({ notes }: Pick<ProfileAnswer, 'notes'>) {
  return (
    <section class="notes" aria-labelledby="notes-heading">
      <h3 id="notes-heading">Completed or dropped on the way in</h3>
      {notes.length === 0 ? (
        <p>Nothing: every level was taken as it is.</p>
      ) : (
        <ul>
          {notes.map(({ message }) => (
            <li key={message}>{message}</li>
          ))}
        </ul>
      )}
    </section>
  )
}
