import { useCallback, useEffect, useState } from 'preact/hooks'
import { call, ServiceAway } from './client.ts'

/** A service that does not answer is asked again after this many ms. */
const AGAIN_MS = 3000

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
    let timer: ReturnType<typeof setTimeout> | undefined
    call<Answer>('GET', path, undefined, { signal: stop.signal })
      .then((answer) => {
        setState({ answer, error: null })
      })
      .catch((error: unknown) => {
        if (stop.signal.aborted) return
        setState(({ answer }) => ({ answer, error: error as Error }))
        if (error instanceof ServiceAway) {
          timer = setTimeout(() => {
            setRound((before) => before + 1)
          }, AGAIN_MS)
        }
      })
    return () => {
      clearTimeout(timer)
      stop.abort()
    }
  }, [path, round])
  const renew = useCallback(() => {
    setRound((before) => before + 1)
  }, [])
  return { ...state, renew }
}
