import { TextField } from '../parts/textField.tsx'
import { trialState } from './planState.ts'

interface FieldProps {
  /** Member of the request, as a JSON pointer */
  path: string
  label: string
  unit?: string
  value: string
  type?: 'text' | 'datetime-local'
  hint?: string
  onType: (value: string) => void
}

/** The id of the field that fills a member of the request. */
export function fieldId(path: string): string {
  return `plan${path.replaceAll('/', '-')}`
}

/** One value of the plan, with what the service says of it. */
export function Field({ path, ...rest }: FieldProps) {
  const faults = trialState.value.faults.filter((fault) => fault.path === path)
  return <TextField {...rest} id={fieldId(path)} faults={faults.map(({ message }) => message)} />
}
