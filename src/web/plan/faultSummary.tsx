import { fieldId } from './field.tsx'
import { trialState } from './planState.ts'

/** All that keeps the plan from flying, each with a way to its field. */
export function FaultSummary() {
  const { faults, away } = trialState.value
  return (
    <div role="alert">
      {away && (
        <p class="fault">
          The service does not answer. What you typed is kept, and it is asked again every two
          seconds.
        </p>
      )}
      {faults.length > 0 && (
        <section class="sheet" aria-label="What keeps this plan from flying">
          <h2>This plan does not fly</h2>
          <ul>
            {faults.map(({ path, message }) => (
              <li key={path + message}>
                <button
                  type="button"
                  class="to-field"
                  onClick={() => {
                    const field = document.getElementById(fieldId(path))
                    field?.closest('details')?.setAttribute('open', '')
                    field?.focus()
                  }}
                >
                  {nameOf(path)}
                </button>{' '}
                {message}
              </li>
            ))}
          </ul>
        </section>
      )}
    </div>
  )
}

/** What a member is called on the sheet. */
function nameOf(path: string): string {
  const label = document.querySelector(`label[for="${CSS.escape(fieldId(path))}"]`)
  return label?.textContent ?? (path || 'The plan')
}
