import { Link } from 'wouter-preact'
import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { span, validity } from './words.ts'

interface SoundingListProps {
  items: ProfileAnswer[]
  chosen: string | undefined
  /** Asks for what follows; null at the end of the list */
  onMore: (() => void) | null
}

/** The stored soundings, newest first. */
export function SoundingList({ items, chosen, onMore }: SoundingListProps) {
  if (items.length === 0) return <p>No sounding is stored yet.</p>
  return (
    <>
      <ul class="soundings">
        {items.map((sounding) => (
          <li key={sounding.id}>
            <Link
              href={`/soundings/${sounding.id}`}
              aria-current={sounding.id === chosen ? 'true' : undefined}
            >
              {sounding.name}
            </Link>
            <p>{validity(sounding)}</p>
            <p class="hint">Wind: {span(sounding.wind)}</p>
          </li>
        ))}
      </ul>
      {onMore && (
        <button type="button" onClick={onMore}>
          Show older ones
        </button>
      )}
    </>
  )
}
