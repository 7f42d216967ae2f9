import { kept } from '../kept.ts'

/** The levels that a notice lists, as they are typed: numbers with commas between. */
export interface AskedLevels {
  flightLevels: string
  altitudesM: string
}

/** Every hundred flight levels and the low ones that controlled airspace often begins at. */
export const DEFAULT_LEVELS: AskedLevels = {
  flightLevels: '50, 100, 195, 300, 400, 500, 600',
  altitudesM: '',
}

export const askedLevels = kept<AskedLevels>(
  'driftbook.notice.levels',
  DEFAULT_LEVELS,
  (value): value is AskedLevels => {
    const levels = value as AskedLevels | null
    return typeof levels?.flightLevels === 'string' && typeof levels.altitudesM === 'string'
  },
)

/** Where the notice of a run with these levels is asked for. */
export function noticePath(runId: string, { flightLevels, altitudesM }: AskedLevels): string {
  const query = new URLSearchParams()
  if (flightLevels.trim()) query.set('flightLevels', list(flightLevels))
  if (altitudesM.trim()) query.set('altitudesM', list(altitudesM))
  return `/v1/runs/${runId}/notice?${query.toString()}`
}

/** The parts of a typed list with commas between, whatever stood there. */
function list(text: string): string {
  return text
    .split(/[\s,;]+/)
    .filter((part) => part !== '')
    .join(',')
}
