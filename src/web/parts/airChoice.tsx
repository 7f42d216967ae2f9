import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { type AirReference } from '../../service/schemas/plan.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { utc } from './moment.ts'

interface AirChoiceProps {
  id: string
  air: AirReference
  onChoose: (air: AirReference) => void
}

/** The stored soundings, newest first, and the standard atmosphere, to choose one air of. */
export function AirChoice({ id, air, onChoose }: AirChoiceProps) {
  const { answer } = useAnswer<{ items: ProfileAnswer[] }>('/v1/profiles?limit=200')
  const chosen = air.kind === 'profile' ? air.id : ''
  const profiles = answer?.items ?? []
  return (
    <select
      id={id}
      value={chosen}
      onChange={({ currentTarget: { value } }) => {
        onChoose(value === '' ? { kind: 'standard' } : { kind: 'profile', id: value })
      }}
    >
      <option value="">Standard atmosphere, no wind</option>
      {chosen !== '' && !profiles.some((profile) => profile.id === chosen) && (
        <option value={chosen}>The sounding chosen before</option>
      )}
      {profiles.map((profile) => (
        <option key={profile.id} value={profile.id}>
          {profile.name}
          {profile.validAt && ` · ${utc(profile.validAt)}`}
        </option>
      ))}
    </select>
  )
}
