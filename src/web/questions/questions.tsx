import { signal, type Signal } from '@preact/signals'
import { type ComponentChildren } from 'preact'
import { lazy, Suspense } from 'preact/compat'
import './questions.css'

const GasPanel = lazy(() => import('./gasPanel.tsx').then((room) => room.GasPanel))
const SurePanel = lazy(() => import('./surePanel.tsx').then((room) => room.SurePanel))
const WhenPanel = lazy(() => import('./whenPanel.tsx').then((room) => room.WhenPanel))
const AreasPanel = lazy(() => import('./areasPanel.tsx').then((room) => room.AreasPanel))

/** Which of the questions stand open; what only they need is not asked for while they are shut. */
export const open = {
  gas: signal(false),
  sure: signal(false),
  when: signal(false),
  areas: signal(false),
}

/** What can be asked beyond one prediction. */
export function Questions() {
  return (
    <section class="questions" aria-label="Questions to many flights">
      <Question
        open={open.gas}
        title="How much gas"
        what="the fill for a wanted rate, height or time"
      >
        <GasPanel />
      </Question>
      <Question open={open.sure} title="How sure" what="many flights, and where they land">
        <SurePanel />
      </Question>
      <Question open={open.when} title="When" what="release times against limits">
        <WhenPanel />
      </Question>
      <Question open={open.areas} title="Areas" what="places to avoid, places wanted">
        <AreasPanel />
      </Question>
    </section>
  )
}

interface QuestionProps {
  open: Signal<boolean>
  title: string
  what: string
  children: ComponentChildren
}

function Question({ open, title, what, children }: QuestionProps) {
  return (
    <details
      class="sheet question"
      open={open.value}
      onToggle={({ currentTarget }) => {
        open.value = currentTarget.open
      }}
    >
      <summary>
        {title} <small>{what}</small>
      </summary>
      {open.value && <Suspense fallback={<p class="waiting">Opening …</p>}>{children}</Suspense>}
    </details>
  )
}
