import { lazy, Suspense } from 'preact/compat'
import { Link, Route, Router, Switch } from 'wouter-preact'
import { useHashLocation } from 'wouter-preact/use-hash-location'
import { PlanFrom } from './plan/planFrom.tsx'
import { PlanView } from './plan/planView.tsx'
import { UnitSwitch } from './parts/unitSwitch.tsx'

// Only the plan sheet is in the first download: it is what a launch director opens the page for.
const BookView = lazy(() => import('./book/bookView.tsx').then((room) => room.BookView))
const FlightView = lazy(() => import('./book/flightView.tsx').then((room) => room.FlightView))
const SoundingsView = lazy(() =>
  import('./soundings/soundingsView.tsx').then((room) => room.SoundingsView),
)
const FieldsView = lazy(() => import('./fields/fieldsView.tsx').then((room) => room.FieldsView))
const RunView = lazy(() => import('./pictures/runView.tsx').then((room) => room.RunView))
const NoticeView = lazy(() => import('./notice/noticeView.tsx').then((room) => room.NoticeView))

const VIEWS = [
  ['/', 'Plan'],
  ['/book', 'Book'],
  ['/soundings', 'Soundings'],
  ['/forecasts', 'Forecasts'],
] as const

/** The flight desk: the frame around every view. */
export function Page() {
  return (
    <Router hook={useHashLocation}>
      <header class="frame">
        <p class="name">Driftbook</p>
        <nav aria-label="Views">
          {VIEWS.map(([path, label]) => (
            <Link key={path} href={path} className={(here: boolean) => (here ? 'here' : '')}>
              {label}
            </Link>
          ))}
        </nav>
        <UnitSwitch />
      </header>
      <main>
        <Suspense fallback={<p class="waiting">Opening …</p>}>
          <Switch>
            <Route path="/" component={PlanView} />
            <Route path="/plan/:flightId">
              {({ flightId }) => <PlanFrom flightId={flightId} />}
            </Route>
            <Route path="/book" component={BookView} />
            <Route path="/book/:flightId">
              {({ flightId }) => <FlightView flightId={flightId} />}
            </Route>
            <Route path="/soundings/:profileId?">
              {({ profileId }) => <SoundingsView chosen={profileId} />}
            </Route>
            <Route path="/forecasts/:fieldId?">
              {({ fieldId }) => <FieldsView chosen={fieldId} />}
            </Route>
            <Route path="/runs/:runId">{({ runId }) => <RunView runId={runId} />}</Route>
            <Route path="/notice/:runId">{({ runId }) => <NoticeView runId={runId} />}</Route>
            <Route>There is nothing here.</Route>
          </Switch>
        </Suspense>
      </main>
      <footer class="frame">
        Airspace notification follows local regulation; the competent authority decides. A
        prediction is no permission.
      </footer>
    </Router>
  )
}
