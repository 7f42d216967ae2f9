import { unitSystem } from '../readings.ts'

/** Metric, or feet and knots: one switch for every reading on the page. */
export function UnitSwitch() {
  const aviation = unitSystem.value === 'aviation'
  return (
    <button
      type="button"
      role="switch"
      aria-checked={aviation}
      onClick={() => (unitSystem.value = aviation ? 'metric' : 'aviation')}
    >
      Feet and knots
    </button>
  )
}
