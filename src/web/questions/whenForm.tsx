import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { utc } from '../parts/moment.ts'
import { Choice } from '../plan/choice.tsx'
import { Field } from '../plan/field.tsx'
import { draft } from '../plan/planState.ts'
import { type Fault } from '../plan/request.ts'
import { areas } from './areas.ts'
import { spanAround, whenDraft, type LimitName, type WhenDraft } from './whenState.ts'

function put(changes: Partial<WhenDraft>): void {
  whenDraft.value = { ...whenDraft.value, ...changes }
}

const LIMITS: readonly {
  name: LimitName
  path: string
  label: string
  unit: string
  hint?: string
}[] = [
  { name: 'groundWindMs', path: 'groundWindMs', label: 'Wind at the fill at most', unit: 'm/s' },
  {
    name: 'sunDeg',
    path: 'sunElevationDeg',
    label: 'Sun at landing at least',
    unit: '°',
    hint: '0: before sunset, −6: before civil dusk',
  },
  { name: 'burstAtLeastM', path: 'burstAltitudeM/atLeast', label: 'Burst at least', unit: 'm' },
  { name: 'burstAtMostM', path: 'burstAltitudeM/atMost', label: 'Burst at most', unit: 'm' },
  {
    name: 'region90Km2',
    path: 'region90Km2',
    label: '90 % of landings within',
    unit: 'km²',
  },
  {
    name: 'distanceAtMostKm',
    path: 'landingDistanceM/atMost',
    label: 'Landing at most',
    unit: 'km',
    hint: 'from the place below',
  },
  {
    name: 'distanceAtLeastKm',
    path: 'landingDistanceM/atLeast',
    label: 'Landing at least',
    unit: 'km',
    hint: 'from the place below',
  },
  {
    name: 'fromLatitudeDeg',
    path: 'landingDistanceM/latitudeDeg',
    label: 'That place: latitude',
    unit: '° N',
    hint: 'the site’s where left empty',
  },
  {
    name: 'fromLongitudeDeg',
    path: 'landingDistanceM/longitudeDeg',
    label: 'That place: longitude',
    unit: '° E',
    hint: 'the site’s where left empty',
  },
]

/** The span of release times, the air, and the limits; a limit left empty is none. */
export function WhenForm({ faults }: { faults: readonly Fault[] }) {
  const typed = whenDraft.value
  const value = (name: 'from' | 'to' | 'stepMinutes' | LimitName) => ({
    value: typed[name],
    faults,
    onType: (text: string) => {
      put({ [name]: text })
    },
  })
  return (
    <>
      <div class="pair wide">
        <Field path="/from" label="First release, UTC" type="datetime-local" {...value('from')} />
        <Field path="/to" label="Last release, UTC" type="datetime-local" {...value('to')} />
        <Field path="/stepMinutes" label="Every" unit="min" {...value('stepMinutes')} />
      </div>
      <p>
        <button
          type="button"
          onClick={() => {
            put(spanAround(draft.value.releaseTime))
          }}
        >
          Six hours before and after the release on the sheet
        </button>
      </p>
      <Soundings />
      <fieldset>
        <legend>Limits</legend>
        <p class="hint">A limit left empty is none.</p>
        <div class="pair">
          {LIMITS.map(({ name, path, ...rest }) => (
            <Field key={name} path={`/limits/${path}`} {...rest} {...value(name)} />
          ))}
        </div>
        <label class="tick">
          <input
            type="checkbox"
            checked={typed.useAreas}
            onChange={({ currentTarget }) => {
              put({ useAreas: currentTarget.checked })
            }}
          />
          Keep to the areas ({areas.value.filter(({ wanted }) => wanted).length} wanted,{' '}
          {areas.value.filter(({ wanted }) => !wanted).length} to avoid)
        </label>
      </fieldset>
    </>
  )
}

/** The soundings to fly in; with several, each release flies in the air of its time. */
function Soundings() {
  const { answer } = useAnswer<{ items: ProfileAnswer[] }>('/v1/profiles?limit=200')
  const { profileIds, between } = whenDraft.value
  const stored = answer?.items ?? []
  if (stored.length === 0) return null
  return (
    <fieldset>
      <legend>Air of the time</legend>
      <p class="hint">With none ticked, every release flies in the air of the sheet.</p>
      <div class="ticks">
        {stored.map(({ id, name, validAt }) => (
          <label key={id} class="tick">
            <input
              type="checkbox"
              checked={profileIds.includes(id)}
              onChange={({ currentTarget: { checked } }) => {
                const others = profileIds.filter((one) => one !== id)
                put({ profileIds: checked ? [...others, id] : others })
              }}
            />
            {name}
            {validAt && ` · ${utc(validAt)}`}
          </label>
        ))}
      </div>
      {profileIds.length > 1 && (
        <Choice
          id="when-between"
          label="Between two soundings fly in"
          value={between}
          options={[
            ['interpolated', 'air between them'],
            ['nearest', 'the nearer one'],
          ]}
          onChoose={(chosen) => {
            put({ between: chosen })
          }}
        />
      )}
    </fieldset>
  )
}
