import { type Fault } from './request.ts'

interface FieldProps {
  /** Member of the request, as a JSON pointer */
  path: string
  label: string
  unit?: string
  value: string
  type?: 'text' | 'datetime-local'
  hint?: string
  /** All that is wrong; what belongs to this field is shown beside it */
  faults: readonly Fault[]
  onType: (value: string) => void
}

/** The id of the field that fills a member of the request. */
export function fieldId(path: string): string {
  return `plan${path.replaceAll('/', '-')}`
}

/** One value of the plan with its unit, and what is wrong with it. */
export function Field(props: FieldProps) {
  const { path, label, unit, value, type = 'text', hint, onType } = props
  const id = fieldId(path)
  const faults = props.faults.filter((fault) => fault.path === path)
  const described = [hint && `${id}-hint`, faults.length > 0 && `${id}-fault`]
  return (
    <div class="field">
      <label for={id}>{label}</label>
      <span class="with-unit">
        <input
          id={id}
          type={type}
          inputMode={type === 'text' && unit ? 'decimal' : undefined}
          autocomplete="off"
          value={value}
          aria-invalid={faults.length > 0}
          aria-describedby={described.filter(Boolean).join(' ') || undefined}
          onInput={({ currentTarget }) => {
            onType(currentTarget.value)
          }}
        />
        {unit && <span class="unit">{unit}</span>}
      </span>
      {hint && (
        <span id={`${id}-hint`} class="hint">
          {hint}
        </span>
      )}
      {faults.length > 0 && (
        <span id={`${id}-fault`} class="fault">
          {faults.map(({ message }) => message).join('; ')}
        </span>
      )}
    </div>
  )
}
