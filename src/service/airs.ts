import { LRUCache } from 'lru-cache'
import { FieldAir } from '../fields/fieldAir.ts'
import { FieldFile } from '../fields/fieldFile.ts'
import { Column } from '../physics/column.ts'
import { ProfileAir } from '../physics/profileAir.ts'
import { type SoundingLevel } from '../physics/sounding.ts'
import {
  standardSource,
  type AirSource,
  type ColumnSource,
  type FieldSource,
} from '../planning/airSource.ts'
import { type Fields } from '../store/fields.ts'
import { type Profiles } from '../store/profiles.ts'
import { Problem } from './problems.ts'
import { type AirReference } from './schemas/plan.ts'

/** Soundings kept tabulated in memory: some 100 kB each. */
const KEPT_PROFILES = 64

/** Forecasts kept open: what was read of each takes some 15 MB. */
const KEPT_FIELDS = 8

/** An open forecast. */
interface OpenField {
  file: FieldFile
  name: string
  refuse: FieldAir
  hold: FieldAir
}

type FieldReference = Extract<AirReference, { kind: 'field' }>

/** Finds the air that a request names, tabulated and ready to fly in. */
export class Airs {
  private readonly profiles: Profiles
  private readonly kept = new LRUCache<string, ColumnSource>({ max: KEPT_PROFILES })
  private readonly fields: Fields
  private readonly fieldPath: (id: string) => string
  private readonly openFields = new LRUCache<string, OpenField>({
    max: KEPT_FIELDS,
    dispose: ({ file }) => {
      file.close()
    },
  })

  constructor(profiles: Profiles, fields: Fields, fieldPath: (id: string) => string) {
    this.profiles = profiles
    this.fields = fields
    this.fieldPath = fieldPath
  }

  /** @throws Problem 422 where it names a sounding or forecast that is not stored. */
  source(air: AirReference): AirSource {
    switch (air.kind) {
      case 'standard':
        return standardSource
      case 'profile':
        return this.profile(air.id)
      case 'field':
        return this.field(air)
    }
  }

  /**
   * A forecast, open: fly in it at once, before it may be closed again.
   * @throws Problem 422 where it is not stored.
   */
  field({ id, outside }: FieldReference): FieldSource {
    const { file, name, refuse, hold } = this.openFields.get(id) ?? this.openField(id)
    const { referenceTime } = file.header
    const field = outside === 'hold' ? hold : refuse
    return { kind: 'field', id, name, referenceTime, field, holding: hold }
  }

  /** Forgets a forecast that was deleted. */
  forgetField(id: string): void {
    this.openFields.delete(id)
  }

  close(): void {
    this.openFields.clear()
  }

  /** Forgets a sounding that was deleted. */
  forget(profileId: string): void {
    this.kept.delete(profileId)
  }

  private openField(id: string): OpenField {
    const row = this.fields.get(id)
    if (!row) {
      const message = `There is no forecast with the id ${id}: upload it first, or choose one of GET /v1/fields.`
      throw new Problem(422, message, [{ path: '/air/id', message }])
    }
    const file = new FieldFile(this.fieldPath(id))
    const open = {
      file,
      name: row.name,
      refuse: new FieldAir(file, 'refuse'),
      hold: new FieldAir(file, 'hold'),
    }
    this.openFields.set(id, open)
    return open
  }

  /** @throws Problem 422 where it is not stored. */
  profile(id: string): ColumnSource {
    const kept = this.kept.get(id)
    if (kept) return kept
    const row = this.profiles.get(id)
    if (!row) {
      const message = `There is no sounding with the id ${id}: upload it first, or choose one of GET /v1/profiles.`
      throw new Problem(422, message, [{ path: '/air/id', message }])
    }
    const { name, validAt, latitude, longitude } = row
    const levels = JSON.parse(row.levels) as SoundingLevel[]
    const source: ColumnSource = {
      kind: 'profile',
      id,
      name,
      validAt,
      position: latitude === null || longitude === null ? null : { latitude, longitude },
      column: new Column(new ProfileAir(levels)),
      recipe: { kind: 'profile', id, levels },
    }
    this.kept.set(id, source)
    return source
  }
}

/** The id of the sounding that an air names; null for other air. */
export function profileIdOf(air: AirReference): string | null {
  return air.kind === 'profile' ? air.id : null
}

/** The id of the forecast that an air names; null for other air. */
export function fieldIdOf(air: AirReference): string | null {
  return air.kind === 'field' ? air.id : null
}
