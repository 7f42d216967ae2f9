// Numerical examples of Snyder, Map Projections: A Working Manual, USGS Professional Paper 1395 (1987),
// appendix A, as recalled (memory): Lambert conformal conic on the sphere and on the Clarke 1866
// ellipsoid, polar stereographic on the International ellipsoid.
import { expect, it } from 'vitest'
import { coneThrough, ConformalCone } from '../../src/fields/conicGrid.ts'

const DEGREE = Math.PI / 180

function projected(projection: ConformalCone, latitude: number, longitude: number) {
  const out = { x: NaN, y: NaN }
  projection.project(latitude * DEGREE, longitude * DEGREE, out)
  return out
}

it.each([
  { earth: { semiMajorAxis: 1, eccentricity: 0 }, x: 0.2966785, y: 0.2462112, digits: 7 },
  {
    earth: { semiMajorAxis: 6_378_206.4, eccentricity: Math.sqrt(0.00676866) },
    x: 1_894_410.9,
    y: 1_564_649.5,
    digits: 1,
  },
])(
  'Lambert conformal conic, standard parallels 33° and 45° ($earth.semiMajorAxis)',
  ({ earth, x, y, digits }) => {
    const cone = coneThrough(33 * DEGREE, 45 * DEGREE, earth)
    const projection = new ConformalCone(earth, cone, 33 * DEGREE, -96 * DEGREE)
    const origin = projected(projection, 23, -96)
    const point = projected(projection, 35, -75)
    expect(point.x - origin.x).toBeCloseTo(x, digits - 0.4)
    expect(point.y - origin.y).toBeCloseTo(y, digits - 0.4)
    const back = projection.unproject(point.x, point.y)
    expect(back.latitude / DEGREE).toBeCloseTo(35, 9)
    expect(back.longitude / DEGREE).toBeCloseTo(-75, 9)
  },
)

it('polar stereographic about the south pole, true at 71° S', () => {
  const earth = { semiMajorAxis: 6_378_388, eccentricity: Math.sqrt(0.00672267) }
  const projection = new ConformalCone(earth, -1, -71 * DEGREE, -100 * DEGREE)
  const point = projected(projection, -75, 150)
  expect(point.x).toBeCloseTo(-1_540_033.6, 0.6)
  expect(point.y).toBeCloseTo(-560_526.4, 0.6)
  const back = projection.unproject(point.x, point.y)
  expect(back.latitude / DEGREE).toBeCloseTo(-75, 9)
  expect(back.longitude / DEGREE).toBeCloseTo(150, 9)
})
