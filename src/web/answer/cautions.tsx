import { type Run } from '../../service/schemas/run.ts'

/** What weakens a prediction, in plain words, and the standing line on airspace. */
export function Cautions(props: { cautions: Run['cautions']; label?: string }) {
  const { cautions, label = 'Cautions' } = props
  return (
    <section aria-label={label}>
      <h3>Heed before you release</h3>
      <ul class="cautions">
        {cautions.map(({ code, message }) => (
          <li key={code} class="caution">
            {message}
          </li>
        ))}
      </ul>
    </section>
  )
}
