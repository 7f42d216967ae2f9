interface ChoiceProps<Value extends string> {
  id: string
  label: string
  value: Value
  options: readonly (readonly [Value, string])[]
  onChoose: (value: Value) => void
}

/** One of a few. */
export function Choice<Value extends string>(props: ChoiceProps<Value>) {
  const { id, label, value, options, onChoose } = props
  return (
    <div class="field">
      <label for={id}>{label}</label>
      <select
        id={id}
        value={value}
        onChange={({ currentTarget }) => {
          const chosen = options.find(([option]) => option === currentTarget.value)
          if (chosen) onChoose(chosen[0])
        }}
      >
        {options.map(([option, name]) => (
          <option key={option} value={option}>
            {name}
          </option>
        ))}
      </select>
    </div>
  )
}
