import { LRUCache } from 'lru-cache'
import { Column } from '../physics/column.ts'
import { ProfileAir } from '../physics/profileAir.ts'
import { type SoundingLevel } from '../physics/sounding.ts'
import { standardSource, type AirSource } from '../planning/airSource.ts'
import { type Profiles } from '../store/profiles.ts'
import { Problem } from './problems.ts'
import { type AirReference } from './schemas/plan.ts'

/** Soundings kept tabulated in memory: some 100 kB each. */
const KEPT_PROFILES = 64

/** Finds the air that a request names, tabulated and ready to fly in. */
export class Airs {
  private readonly profiles: Profiles
  private readonly kept = new LRUCache<string, AirSource>({ max: KEPT_PROFILES })

  constructor(profiles: Profiles) {
    this.profiles = profiles
  }

  /** @throws Problem 422 where it names a sounding that is not stored. */
  source(air: AirReference): AirSource {
    switch (air.kind) {
      case 'standard':
        return standardSource
      case 'profile':
        return this.profile(air.id)
    }
  }

  /** Forgets a sounding that was deleted. */
  forget(profileId: string): void {
    this.kept.delete(profileId)
  }

  private profile(id: string): AirSource {
    const kept = this.kept.get(id)
    if (kept) return kept
    const row = this.profiles.get(id)
    if (!row) {
      const message = `There is no sounding with the id ${id}: upload it first, or choose one of GET /v1/profiles.`
      throw new Problem(422, message, [{ path: '/air/id', message }])
    }
    const { name, validAt, latitude, longitude } = row
    const source: AirSource = {
      kind: 'profile',
      id,
      name,
      validAt,
      position: latitude === null || longitude === null ? null : { latitude, longitude },
      column: new Column(new ProfileAir(JSON.parse(row.levels) as SoundingLevel[])),
    }
    this.kept.set(id, source)
    return source
  }
}

/** The id of the sounding that an air names; null for other air. */
export function profileIdOf(air: AirReference): string | null {
  return air.kind === 'profile' ? air.id : null
}
