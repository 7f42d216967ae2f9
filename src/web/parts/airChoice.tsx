import { type FieldAnswer } from '../../service/schemas/field.ts'
import { type AirReference } from '../../service/schemas/plan.ts'
import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { utc } from './moment.ts'

interface AirChoiceProps {
  id: string
  air: AirReference
  onChoose: (air: AirReference) => void
}

/** The stored soundings and forecasts, newest first, and the standard atmosphere: one air of them. */
export function AirChoice({ id, air, onChoose }: AirChoiceProps) {
  const profiles = useAnswer<{ items: ProfileAnswer[] }>('/v1/profiles?limit=200').answer?.items
  const fields = useAnswer<{ items: FieldAnswer[] }>('/v1/fields?limit=200').answer?.items
  const chosen = air.kind === 'standard' ? '' : air.id
  const known = [...(profiles ?? []), ...(fields ?? [])].some((one) => one.id === chosen)

  const choose = (value: string) => {
    if (value === '') onChoose({ kind: 'standard' })
    else if (value === chosen) onChoose(air)
    else if (fields?.some((field) => field.id === value)) {
      onChoose({ kind: 'field', id: value, outside: 'refuse' })
    } else onChoose({ kind: 'profile', id: value })
  }

  return (
    <>
      <select
        id={id}
        value={chosen}
        onChange={({ currentTarget }) => {
          choose(currentTarget.value)
        }}
      >
        <option value="">Standard atmosphere, no wind</option>
        {chosen !== '' && !known && <option value={chosen}>The air chosen before</option>}
        {profiles && profiles.length > 0 && (
          <optgroup label="Soundings">
            {profiles.map(({ id: profileId, name, validAt }) => (
              <option key={profileId} value={profileId}>
                {name}
                {validAt && ` · ${utc(validAt)}`}
              </option>
            ))}
          </optgroup>
        )}
        {fields && fields.length > 0 && (
          <optgroup label="Forecasts">
            {fields.map(({ id: fieldId, name, validTimes }) => (
              <option key={fieldId} value={fieldId}>
                {name} · {utc(validTimes[0])} to {utc(validTimes[validTimes.length - 1])}
              </option>
            ))}
          </optgroup>
        )}
      </select>
      {air.kind === 'field' && (
        <label class="tick">
          <input
            type="checkbox"
            checked={air.outside === 'hold'}
            onChange={({ currentTarget }) => {
              onChoose({ ...air, outside: currentTarget.checked ? 'hold' : 'refuse' })
            }}
          />
          Beyond the forecast, hold its nearest air
        </label>
      )}
    </>
  )
}
