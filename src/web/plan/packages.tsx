import { type PackageDraft } from './draft.ts'
import { Field } from './field.tsx'
import { change, draft } from './planState.ts'

/** The single packages on the line and its strength: they decide the class of the balloon. */
export function Packages() {
  const { packages, lineStrengthN } = draft.value
  const put = (index: number, changes: Partial<PackageDraft>) => {
    change({
      packages: packages.map((one, at) => (at === index ? { ...one, ...changes } : one)),
    })
  }
  return (
    <details>
      <summary>
        Packages on the line{packages.length > 0 && `: ${packages.length}`} (for the notice sheet)
      </summary>
      <div class="stack">
        {packages.map((one, index) => {
          const path = `/payload/packages/${index}`
          return (
            <div class="package" key={index} role="group" aria-label={`Package ${index + 1}`}>
              <Field
                path={`${path}/name`}
                label="Package"
                value={one.name}
                onType={(name) => {
                  put(index, { name })
                }}
              />
              <div class="pair">
                <Field
                  path={`${path}/massG`}
                  label="Mass"
                  unit="g"
                  value={one.massG}
                  onType={(massG) => {
                    put(index, { massG })
                  }}
                />
                <Field
                  path={`${path}/smallestFaceCm2`}
                  label="Smallest face"
                  unit="cm²"
                  value={one.smallestFaceCm2}
                  onType={(smallestFaceCm2) => {
                    put(index, { smallestFaceCm2 })
                  }}
                />
              </div>
              <button
                type="button"
                onClick={() => {
                  change({ packages: packages.filter((_, at) => at !== index) })
                }}
              >
                Take package {index + 1} off
              </button>
            </div>
          )
        })}
        <button
          type="button"
          onClick={() => {
            const added = { name: `Package ${packages.length + 1}`, massG: '', smallestFaceCm2: '' }
            change({ packages: [...packages, added] })
          }}
        >
          Add a package
        </button>
        <Field
          path="/payload/lineStrengthN"
          label="The line parts at"
          unit="N"
          value={lineStrengthN}
          onType={(value) => {
            change({ lineStrengthN: value })
          }}
        />
      </div>
    </details>
  )
}
