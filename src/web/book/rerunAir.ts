import { useState } from 'preact/hooks'
import { type AirReference } from '../../service/schemas/plan.ts'
import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { useAnswer } from '../api/useAnswer.ts'

const STANDARD: AirReference = { kind: 'standard' }

/**
 * The air to fly again in: the sounding stored last, until another is chosen; null until it is known
 * whether there is one.
 */
export function useRerunAir(): [AirReference | null, (air: AirReference) => void] {
  const { answer } = useAnswer<{ items: ProfileAnswer[] }>('/v1/profiles?limit=1')
  const [chosen, setChosen] = useState<AirReference | null>(null)
  const newest = answer?.items.map(({ id }): AirReference => ({ kind: 'profile', id }))
  return [chosen ?? (newest && (newest.at(0) ?? STANDARD)) ?? null, setChosen]
}
