import { type Outcome } from '../../service/schemas/flight.ts'

/** What happened, as it is being typed. */
export interface OutcomeDraft {
  burstTime: string
  burstAltitude: string
  landingTime: string
  landingLatitude: string
  landingLongitude: string
  remarks: string
}

export const OUTCOME_FIELDS: {
  name: keyof OutcomeDraft
  label: string
  type: 'datetime-local' | 'number' | 'text'
}[] = [
  { name: 'burstTime', label: 'Burst, UTC', type: 'datetime-local' },
  { name: 'burstAltitude', label: 'Burst height, m', type: 'number' },
  { name: 'landingTime', label: 'Landing, UTC', type: 'datetime-local' },
  { name: 'landingLatitude', label: 'Landing latitude, degrees north', type: 'number' },
  { name: 'landingLongitude', label: 'Landing longitude, degrees east', type: 'number' },
  { name: 'remarks', label: 'Remarks', type: 'text' },
]

/** The draft of what is kept already; empty where nothing is. */
export function emptyDraft(outcome: Outcome | null): OutcomeDraft {
  const { burst, landing, remarks } = outcome ?? {}
  return {
    burstTime: burst?.time?.slice(0, 16) ?? '',
    burstAltitude: text(burst?.altitudeM),
    landingTime: landing?.time?.slice(0, 16) ?? '',
    landingLatitude: text(landing?.latitudeDeg),
    landingLongitude: text(landing?.longitudeDeg),
    remarks: remarks ?? '',
  }
}

/** The outcome that a draft says; what is empty is left out. */
export function outcomeOf(draft: OutcomeDraft) {
  const burst = {
    ...(draft.burstTime && { time: `${draft.burstTime}Z` }),
    ...(draft.burstAltitude && { altitudeM: Number(draft.burstAltitude) }),
  }
  const landing = {
    ...(draft.landingTime && { time: `${draft.landingTime}Z` }),
    ...(draft.landingLatitude && { latitudeDeg: Number(draft.landingLatitude) }),
    ...(draft.landingLongitude && { longitudeDeg: Number(draft.landingLongitude) }),
  }
  return {
    ...(Object.keys(burst).length > 0 && { burst }),
    ...(Object.keys(landing).length > 0 && { landing }),
    ...(draft.remarks && { remarks: draft.remarks }),
  }
}

function text(value: number | undefined): string {
  return value === undefined ? '' : String(value)
}
