import { Link, useLocation } from 'wouter-preact'
import { type FieldAnswer } from '../../service/schemas/field.ts'
import { usePages } from '../api/usePages.ts'
import { utc } from '../soundings/words.ts'
import { FieldSheet } from './fieldSheet.tsx'
import { FieldUpload } from './fieldUpload.tsx'
import '../soundings/soundings.css'
import './fields.css'

/** The stored forecasts: added, looked at, deleted. */
export function FieldsView({ chosen }: { chosen?: string | undefined }) {
  const { page, trouble, load } = usePages<FieldAnswer>('/v1/fields')
  const [, go] = useLocation()

  return (
    <div class="soundings-view">
      <h1>Forecasts</h1>
      <div class="soundings-side">
        <FieldUpload
          onUploaded={(field) => {
            void load(null, [])
            go(`/forecasts/${field.id}`)
          }}
        />
        <section aria-labelledby="stored-heading">
          <h2 id="stored-heading">Stored</h2>
          {trouble !== null && <p role="alert">{trouble}</p>}
          {page && <FieldList items={page.items} chosen={chosen} />}
          {page && page.nextCursor !== null && (
            <button type="button" onClick={() => void load(page.nextCursor, page.items)}>
              Show older ones
            </button>
          )}
        </section>
      </div>
      {chosen === undefined ? (
        <p class="hint">Choose a forecast to see when and where it is valid, and its wind.</p>
      ) : (
        <FieldSheet
          key={chosen}
          id={chosen}
          onDeleted={() => {
            void load(null, [])
            go('/forecasts')
          }}
        />
      )}
    </div>
  )
}

function FieldList({ items, chosen }: { items: FieldAnswer[]; chosen: string | undefined }) {
  if (items.length === 0) return <p>No forecast is stored yet.</p>
  return (
    <ul class="soundings">
      {items.map(({ id, name, referenceTime, validTimes }) => (
        <li key={id}>
          <Link href={`/forecasts/${id}`} aria-current={id === chosen ? 'true' : undefined}>
            {name}
          </Link>
          <p>run of {utc(referenceTime)}</p>
          <p class="hint">valid {validSpan(validTimes)}</p>
        </li>
      ))}
    </ul>
  )
}

function validSpan(times: readonly string[]): string {
  const [first, last] = [times[0], times[times.length - 1]]
  return times.length === 1 ? utc(first) : `${utc(first)} to ${utc(last)}, ${times.length} times`
}
