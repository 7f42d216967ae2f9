import { useState } from 'preact/hooks'
import { Link } from 'wouter-preact'
import { type Flight } from '../../service/schemas/flight.ts'
import { call } from '../api/client.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { Fault } from '../parts/fault.tsx'
import { kept } from '../kept.ts'
import { FlightRow } from './flightRow.tsx'
import { FlyAgain } from './flyAgain.tsx'
import './book.css'

interface Search {
  title: string
  from: string
  to: string
}

const search = kept<Search>('driftbook.book.search', { title: '', from: '', to: '' }, isSearch)

interface FlightPage {
  items: Flight[]
  nextCursor: string | null
}

/** The stored flights, newest first: to be found, opened, and flown again in newer air. */
export function BookView() {
  const path = searchPath(search.value)
  const { answer, error, renew } = useAnswer<FlightPage>(path)
  const [more, setMore] = useState<{ of: FlightPage; pages: FlightPage[] } | null>(null)
  const [moreError, setMoreError] = useState<Error | null>(null)
  const [chosen, setChosen] = useState<ReadonlySet<string>>(new Set())
  const pages = answer ? [answer, ...(more?.of === answer ? more.pages : [])] : []
  const flights = pages.flatMap((page) => page.items)
  const next = pages.at(-1)?.nextCursor
  // What a search has hidden is not flown behind its back.
  const chosenIds = flights.map(({ id }) => id).filter((id) => chosen.has(id))

  const choose = (id: string, yes: boolean) => {
    const changed = new Set(chosen)
    if (yes) changed.add(id)
    else changed.delete(id)
    setChosen(changed)
  }
  const showMore = async () => {
    if (!answer || !next) return
    setMoreError(null)
    try {
      const page = await call<FlightPage>('GET', `${path}&cursor=${encodeURIComponent(next)}`)
      setMore({ of: answer, pages: [...pages.slice(1), page] })
    } catch (failure) {
      setMoreError(failure as Error)
    }
  }

  return (
    <div class="book stack">
      <h1>Book of flights</h1>
      <SearchForm />
      <Fault error={error} />
      {!answer && !error && <p class="waiting">Opening the book …</p>}
      {answer && flights.length === 0 && <NoFlight />}
      {flights.length > 0 && (
        <>
          <FlyAgain flightIds={chosenIds} onFlown={renew} />
          <p class="row">
            <label class="tick">
              <input
                type="checkbox"
                checked={flights.every(({ id }) => chosen.has(id))}
                onChange={({ currentTarget: { checked } }) => {
                  setChosen(new Set(checked ? flights.map(({ id }) => id) : []))
                }}
              />
              Choose all {flights.length} shown
            </label>
          </p>
          <ul class="plain stack" aria-label="Stored flights">
            {flights.map((flight) => (
              <FlightRow
                key={flight.id}
                flight={flight}
                chosen={chosen.has(flight.id)}
                onChoose={(yes) => {
                  choose(flight.id, yes)
                }}
              />
            ))}
          </ul>
        </>
      )}
      <Fault error={moreError} />
      {next && (
        <button type="button" onClick={() => void showMore()}>
          Show more
        </button>
      )}
    </div>
  )
}

function NoFlight() {
  const { title, from, to } = search.value
  if (title.trim() === '' && from === '' && to === '') {
    return (
      <p>
        No flight is stored yet: <Link href="/">plan one</Link>.
      </p>
    )
  }
  return (
    <p class="row">
      No stored flight matches.
      <button type="button" onClick={() => (search.value = { title: '', from: '', to: '' })}>
        Show all
      </button>
    </p>
  )
}

function SearchForm() {
  const set = (change: Partial<Search>) => (search.value = { ...search.value, ...change })
  return (
    <form
      class="row"
      role="search"
      onSubmit={(event) => {
        event.preventDefault()
      }}
    >
      <div class="field">
        <label for="search-title">Title contains</label>
        <input
          id="search-title"
          type="search"
          value={search.value.title}
          onInput={({ currentTarget }) => set({ title: currentTarget.value })}
        />
      </div>
      <div class="field">
        <label for="search-from">Released from</label>
        <input
          id="search-from"
          type="date"
          value={search.value.from}
          onInput={({ currentTarget }) => set({ from: currentTarget.value })}
        />
      </div>
      <div class="field">
        <label for="search-to">to (UTC days)</label>
        <input
          id="search-to"
          type="date"
          value={search.value.to}
          onInput={({ currentTarget }) => set({ to: currentTarget.value })}
        />
      </div>
    </form>
  )
}

const DAY = 86_400_000

function searchPath({ title, from, to }: Search): string {
  const query = new URLSearchParams({ limit: '50' })
  if (title.trim() !== '') query.set('title', title.trim())
  if (from !== '') query.set('launchFrom', `${from}T00:00:00Z`)
  if (to !== '') {
    query.set('launchTo', new Date(Date.parse(`${to}T00:00:00Z`) + DAY).toISOString())
  }
  return `/v1/flights?${query.toString()}`
}

function isSearch(value: unknown): value is Search {
  const search = value as Search | null
  return [search?.title, search?.from, search?.to].every((part) => typeof part === 'string')
}
