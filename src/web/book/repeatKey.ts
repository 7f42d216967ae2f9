import { v7 as uuid } from 'uuid'
import { useMemo, useState } from 'preact/hooks'

/**
 * The Idempotency-Key of a request: the same while the request stays, so that one sent again after a lost
 * answer is stored once; another after `spend`.
 */
export function useRepeatKey(request: string): { key: string; spend: () => void } {
  const [round, setRound] = useState(0)
  const key = useMemo(() => uuid(), [request, round])
  const spend = () => {
    setRound(round + 1)
  }
  return { key, spend }
}
