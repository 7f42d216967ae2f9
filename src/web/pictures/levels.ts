import { call } from '../api/client.ts'
import { type Level } from './windColumn.ts'

/** Soundings whose levels are kept: as many as one looks at in a sitting. */
const MOST_KEPT = 30

const kept = new Map<string, Promise<Level[]>>()

/** The completed levels of a sounding, asked for once: a stored sounding never changes. */
export function levelsOf(profileId: string): Promise<Level[]> {
  let levels = kept.get(profileId)
  if (!levels) {
    levels = call<{ levels: Level[] }>('GET', `/v1/profiles/${profileId}/levels`).then(
      (answer) => answer.levels,
    )
    levels.catch(() => kept.delete(profileId))
    kept.set(profileId, levels)
    const [oldest] = kept.keys()
    if (kept.size > MOST_KEPT) kept.delete(oldest)
  }
  return levels
}
