import { describe, expect, test } from 'vitest'
import { cutAtAntimeridian } from '../../src/planning/antimeridian.ts'

const DEGREE = Math.PI / 180

type Ring = [number, number][]
const radians = (ring: Ring) =>
  ring.map(([east, north]): [number, number] => [east * DEGREE, north * DEGREE])
const cut = (...rings: Ring[]) =>
  cutAtAntimeridian([rings.map(radians)]).map((polygon) =>
    polygon.map((ring) =>
      ring.map(([east, north]) => [Math.round(east / DEGREE), Math.round(north / DEGREE)]),
    ),
  )

describe('polygons at the antimeridian', () => {
  test('the example of RFC 7946, section 3.1.9, is cut as the section says', () => {
    const across: Ring = [
      [170, 40],
      [180, 40],
      [-170, 40],
      [-170, 50],
      [180, 50],
      [170, 50],
      [170, 40],
    ]
    const parts = cut(across)
    expect(parts).toHaveLength(2)
    const spans = parts.map(([ring]) => [
      Math.min(...ring.map(([east]) => east)),
      Math.max(...ring.map(([east]) => east)),
      Math.min(...ring.map(([, north]) => north)),
      Math.max(...ring.map(([, north]) => north)),
    ])
    expect(spans).toContainEqual([170, 180, 40, 50])
    expect(spans).toContainEqual([-180, -170, 40, 50])
    for (const [ring] of parts) expect(ring.at(-1)).toEqual(ring[0])
  })

  test('what does not cross it stays as it is, holes too', () => {
    const outer: Ring = [
      [-10, -10],
      [10, -10],
      [10, 10],
      [-10, 10],
      [-10, -10],
    ]
    const hole: Ring = [
      [-1, -1],
      [-1, 1],
      [1, 1],
      [1, -1],
      [-1, -1],
    ]
    expect(cut(outer, hole)).toEqual([[outer, hole]])
  })

  test('a ring round the pole covers the pole', () => {
    const round: Ring = [-180, -120, -60, 0, 60, 120, 180].map((east) => [east, -89])
    const parts = cut(round)
    // The cap below 89° south is the whole strip from there to the pole.
    const area = parts.reduce((sum, [ring]) => sum + Math.abs(shoelace(ring)), 0)
    expect(area).toBeCloseTo(360, 6)
  })
})

function shoelace(ring: number[][]): number {
  let twice = 0
  for (let index = 1; index < ring.length; index++) {
    const [[a, b], [c, d]] = [ring[index - 1], ring[index]]
    twice += a * d - c * b
  }
  return twice / 2
}
