import { useEffect, useState } from 'preact/hooks'
import { useLocation } from 'wouter-preact'
import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { call } from '../api/client.ts'
import { SoundingList } from './soundingList.tsx'
import { SoundingSheet } from './soundingSheet.tsx'
import { UploadForm } from './uploadForm.tsx'
import './soundings.css'

interface Page {
  items: ProfileAnswer[]
  nextCursor: string | null
}

/** How many soundings a page of the list has. */
const PAGE = 20

/** The stored soundings: added, looked at, deleted. */
export function SoundingsView({ chosen }: { chosen?: string | undefined }) {
  const [page, setPage] = useState<Page | null>(null)
  const [trouble, setTrouble] = useState<string | null>(null)
  const [, go] = useLocation()

  const load = async (cursor: string | null, before: ProfileAnswer[]) => {
    try {
      const more = cursor === null ? '' : `&cursor=${encodeURIComponent(cursor)}`
      const next = await call<Page>('GET', `/v1/profiles?limit=${PAGE}${more}`)
      setPage({ items: [...before, ...next.items], nextCursor: next.nextCursor })
      setTrouble(null)
    } catch (error) {
      setTrouble(error instanceof Error ? error.message : String(error))
    }
  }
  useEffect(() => void load(null, []), [])

  return (
    <div class="soundings-view">
      <h1>Soundings</h1>
      <div class="soundings-side">
        <UploadForm
          onUploaded={(profiles) => {
            void load(null, [])
            go(`/soundings/${profiles[0].id}`)
          }}
        />
        <section aria-labelledby="stored-heading">
          <h2 id="stored-heading">Stored</h2>
          {trouble !== null && <p role="alert">{trouble}</p>}
          {page && (
            <SoundingList
              items={page.items}
              chosen={chosen}
              onMore={
                page.nextCursor === null ? null : () => void load(page.nextCursor, page.items)
              }
            />
          )}
        </section>
      </div>
      {chosen === undefined ? (
        <p class="hint">
          Choose a sounding to see its levels and what was done to it on the way in.
        </p>
      ) : (
        <SoundingSheet
          key={chosen}
          id={chosen}
          onDeleted={() => {
            void load(null, [])
            go('/soundings')
          }}
        />
      )}
    </div>
  )
}
