import { useState } from 'preact/hooks'
import { useDropping } from '../parts/useDropping.ts'
import { Choice } from '../plan/choice.tsx'
import { type ShownArea } from '../pictures/shownArea.ts'
import { addArea, areas } from './areas.ts'
import { readAreas } from './readAreas.ts'

/** Places to avoid and places wanted: drawn on the map, pasted, or from a file. */
export function AreasPanel() {
  const [text, setText] = useState('')
  const [said, setSaid] = useState<{ fault: boolean; words: string }>({ fault: false, words: '' })

  const take = (source: string) => {
    try {
      const found = readAreas(source)
      for (const { name, polygon } of found) addArea(polygon, name)
      setSaid({
        fault: false,
        words: `${found.length === 1 ? 'One area' : `${found.length} areas`} taken.`,
      })
      setText('')
    } catch (error) {
      setSaid({ fault: true, words: (error as Error).message })
    }
  }
  const takeFiles = async (files: Iterable<File>) => {
    for (const file of files) take(await file.text())
  }

  const { over, handlers } = useDropping((files) => void takeFiles(files))

  return (
    <div class={over ? 'stack over' : 'stack'} {...handlers}>
      <p>
        “How sure” tells the share of landings in each; “When” can be kept to them. Draw one on the
        map above, drop a GeoJSON file here, or paste its text.
      </p>
      {areas.value.map((area, index) => (
        <AreaRow key={index} area={area} index={index} />
      ))}
      <div class="row">
        <div class="field">
          <label for="areas-file">GeoJSON file</label>
          <input
            id="areas-file"
            type="file"
            accept=".geojson,.json,application/geo+json,application/json"
            onChange={({ currentTarget }) => {
              void takeFiles(currentTarget.files ?? []).then(() => (currentTarget.value = ''))
            }}
          />
        </div>
      </div>
      <div class="field">
        <label for="areas-text">GeoJSON text</label>
        <textarea
          id="areas-text"
          rows={3}
          value={text}
          onInput={({ currentTarget }) => {
            setText(currentTarget.value)
          }}
        />
      </div>
      <p class="row">
        <button
          type="button"
          disabled={text.trim() === ''}
          onClick={() => {
            take(text)
          }}
        >
          Take these areas
        </button>
        <span role="status" class={said.fault ? 'fault' : ''}>
          {said.words}
        </span>
      </p>
    </div>
  )
}

function AreaRow({ area, index }: { area: ShownArea; index: number }) {
  const put = (changes: Partial<ShownArea>) => {
    areas.value = areas.value.map((one, at) => (at === index ? { ...one, ...changes } : one))
  }
  return (
    <div class="row" role="group" aria-label={`Area ${index + 1}`}>
      <div class="field grow">
        <label for={`area-${index}-name`}>Name</label>
        <input
          id={`area-${index}-name`}
          value={area.name}
          maxLength={200}
          onInput={({ currentTarget }) => {
            put({ name: currentTarget.value })
          }}
        />
      </div>
      <Choice
        id={`area-${index}-kind`}
        label="Land there?"
        value={area.wanted ? 'wanted' : 'avoid'}
        options={[
          ['avoid', 'to avoid'],
          ['wanted', 'wanted'],
        ]}
        onChoose={(kind) => {
          put({ wanted: kind === 'wanted' })
        }}
      />
      <button
        type="button"
        aria-label={`Remove ${area.name}`}
        onClick={() => {
          areas.value = areas.value.filter((_, at) => at !== index)
        }}
      >
        Remove
      </button>
    </div>
  )
}
