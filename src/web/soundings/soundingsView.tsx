import { useLocation } from 'wouter-preact'
import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { usePages } from '../api/usePages.ts'
import { SoundingList } from './soundingList.tsx'
import { SoundingSheet } from './soundingSheet.tsx'
import { UploadForm } from './uploadForm.tsx'
import './soundings.css'

/** The stored soundings: added, looked at, deleted. */
export function SoundingsView({ chosen }: { chosen?: string | undefined }) {
  const { page, trouble, load } = usePages<ProfileAnswer>('/v1/profiles')
  const [, go] = useLocation()

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
