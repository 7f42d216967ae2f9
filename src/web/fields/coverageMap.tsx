import { useEffect, useState } from 'preact/hooks'
import { type FieldAnswer } from '../../service/schemas/field.ts'
import { place } from '../pictures/words.ts'
import { outlineOf, sheetAround } from './coverage.ts'
import { worldPath } from './world.ts'

interface CoverageMapProps {
  field: FieldAnswer
  /** The place whose wind is shown */
  spot: { latitudeDeg: number; longitudeDeg: number } | null
}

/** Where a forecast reaches: the outline of its grid on the world's coasts. */
export function CoverageMap({ field, spot }: CoverageMapProps) {
  const [land, setLand] = useState('')
  useEffect(() => {
    void worldPath().then(setLand)
  }, [])
  const outline = outlineOf(field)
  const [west, south, east, north] = sheetAround(outline)
  const point = ([x, y]: readonly [number, number]) => `${x} ${-y}`
  // The world's sheet once more on both sides, for grids across its edge.
  const sheets = [-360, 0, 360].filter((turn) => turn + 180 > west && turn - 180 < east)
  return (
    <figure class="coverage">
      <figcaption>Where it reaches</figcaption>
      <svg
        viewBox={`${west} ${-north} ${east - west} ${north - south}`}
        role="img"
        aria-label={coverageWords(field)}
      >
        {sheets.map((turn) => (
          <path key={turn} class="land" d={land} transform={`translate(${turn} 0)`} />
        ))}
        <path class="reach" d={`M${outline.map(point).join('L')}Z`} />
        {spot && (
          <path class="spot" d={`M${onSheet(spot.longitudeDeg, west)} ${-spot.latitudeDeg}h0`} />
        )}
      </svg>
    </figure>
  )
}

function onSheet(longitude: number, west: number): number {
  return west + ((((longitude - west) % 360) + 360) % 360)
}

function coverageWords({ grid }: FieldAnswer): string {
  const corners = grid.corners.map((corner) => place(corner.latitudeDeg, corner.longitudeDeg, 1))
  return `${grid.description}, ${grid.columns} by ${grid.rows} points, ${
    grid.wraps ? 'all round the earth' : 'with corners at'
  } ${corners.join('; ')}`
}
