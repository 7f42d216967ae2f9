interface TextFieldProps {
  id: string
  label: string
  unit?: string | undefined
  value: string
  type?: 'text' | 'datetime-local' | undefined
  hint?: string | undefined
  /** What is wrong with the value */
  faults: readonly string[]
  onType: (value: string) => void
}

/** One value with its unit, and what is wrong with it beside it. */
export function TextField(props: TextFieldProps) {
  const { id, label, unit, value, type = 'text', hint, faults, onType } = props
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
          {faults.join('; ')}
        </span>
      )}
    </div>
  )
}
