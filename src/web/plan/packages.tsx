import { type PackageDraft } from './draft.ts'
import { Field } from './field.tsx'
import { type Fault } from './request.ts'

interface PackagesProps {
  packages: readonly PackageDraft[]
  lineStrengthN: string
  faults: readonly Fault[]
  open?: boolean
  onChange: (changes: { packages?: PackageDraft[]; lineStrengthN?: string }) => void
}

/** The single packages on the line and its strength: they decide the class of the balloon. */
export function Packages(props: PackagesProps) {
  const { packages, lineStrengthN, faults, open, onChange } = props
  const put = (index: number, changes: Partial<PackageDraft>) => {
    onChange({
      packages: packages.map((one, at) => (at === index ? { ...one, ...changes } : one)),
    })
  }
  return (
    <details open={open}>
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
                faults={faults}
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
                  faults={faults}
                  onType={(massG) => {
                    put(index, { massG })
                  }}
                />
                <Field
                  path={`${path}/smallestFaceCm2`}
                  label="Smallest face"
                  unit="cm²"
                  value={one.smallestFaceCm2}
                  faults={faults}
                  onType={(smallestFaceCm2) => {
                    put(index, { smallestFaceCm2 })
                  }}
                />
              </div>
              <button
                type="button"
                onClick={() => {
                  onChange({ packages: packages.filter((_, at) => at !== index) })
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
            onChange({ packages: [...packages, added] })
          }}
        >
          Add a package
        </button>
        <Field
          path="/payload/lineStrengthN"
          label="The line parts at"
          unit="N"
          value={lineStrengthN}
          faults={faults}
          onType={(value) => {
            onChange({ lineStrengthN: value })
          }}
        />
      </div>
    </details>
  )
}
