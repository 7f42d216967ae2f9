import { useCallback, useEffect, useState } from 'preact/hooks'
import { call } from './client.ts'

/** What was asked of the service, and how far the asking is. */
export interface Asked<Answer> {
  /** The newest answer; the old one stays while it is asked again */
  answer: Answer | null
  error: Error | null
  /** Asks again */
  renew: () => void
}

/** Asks the service for `path` and again whenever it changes; nothing is asked for null. */
export function useAnswer<Answer>(path: string | null): Asked<Answer> {
  const [state, setState] = useState<{ answer: Answer | null; error: Error | null }>({
    answer: null,
    error: null,
  })
  const [round, setRound] = useState(0)
  useEffect(() => {
    if (path === null) return undefined
    const stop = new AbortController()
    call<Answer>('GET', path, undefined, { signal: stop.signal })
      .then((answer) => {
        setState({ answer, error: null })
      })
      .catch((error: unknown) => {
        if (!stop.signal.aborted) setState(({ answer }) => ({ answer, error: error as Error }))
      })
    return () => {
      stop.abort()
    }
  }, [path, round])
  const renew = useCallback(() => {
    setRound((before) => before + 1)
  }, [])
  return { ...state, renew }
}
