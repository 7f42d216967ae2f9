import { effect, signal, type Signal } from '@preact/signals'

/** A signal whose value survives a reload; `accept` says whether what was kept still makes sense. */
export function kept<Value>(
  name: string,
  initial: Value,
  accept: (value: unknown) => value is Value,
): Signal<Value> {
  const state = signal(read(name, accept) ?? initial)
  effect(() => {
    try {
      localStorage.setItem(name, JSON.stringify(state.value))
    } catch {
      // A browser without storage forgets; nothing else depends on it.
    }
  })
  return state
}

function read<Value>(name: string, accept: (value: unknown) => value is Value): Value | null {
  try {
    const value: unknown = JSON.parse(localStorage.getItem(name) ?? 'null')
    return accept(value) ? value : null
  } catch {
    return null
  }
}
