import { type FieldCoverage, type OutsideField } from '../fields/outsideField.ts'
import { type Fault } from './problems.ts'
import { degrees, isoTime, round } from './units.ts'

/** Says where a flight leaves a forecast, and what would work. */
export function describeOutside(error: OutsideField): Fault {
  const remedy =
    error.beyond === 'values'
      ? ''
      : ' With "outside": "hold" the nearest air is taken beyond the grid and the times.'
  return { path: '/air', message: `${outsideMessage(error)}${remedy}` }
}

/** Says where air was asked for that a forecast does not hold, and the span that it holds. */
export function outsideMessage({ beyond, at, coverage }: OutsideField): string {
  const place = `${degreesText(at.latitude)}, ${degreesText(at.longitude)} (degrees north, east) at ${isoTime(at.time)}`
  return `The forecast has no air at ${place}: ${why(beyond, coverage)}.`
}

function why(beyond: OutsideField['beyond'], coverage: FieldCoverage): string {
  switch (beyond) {
    case 'times':
      return `it is valid from ${isoTime(coverage.firstTime)} to ${isoTime(coverage.lastTime)}`
    case 'grid':
      return `its grid (${coverage.grid}) has its corners at ${coverage.corners.map(corner).join('; ')}`
    case 'values':
      return 'its values are missing there'
  }
}

function corner({ latitude, longitude }: { latitude: number; longitude: number }): string {
  return `${degreesText(latitude)}, ${degreesText(longitude)}`
}

function degreesText(radians: number): string {
  return String(round(degrees(radians), 3))
}
