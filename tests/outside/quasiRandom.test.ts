import { describe, expect, it } from 'vitest'
import { normalQuantile } from '../../src/planning/normal.ts'
import { MOST_DIMENSIONS, ScrambledSobol } from '../../src/planning/sobol.ts'

describe('the Sobol sequence before scrambling', () => {
  // SciPy 1.17, stats.qmc.Sobol(48, scramble=False, bits=32): its points 100 and 37, which it gives in the
  // order of Gray's code, in dimensions 0, 1, 2, 9, 20, 38 and 47.
  it.each([
    [100, [0.4140625, 0.2578125, 0.7734375, 0.6953125, 0.7578125, 0.8984375, 0.7109375]],
    [37, [0.921875, 0.640625, 0.578125, 0.171875, 0.953125, 0.953125, 0.265625]],
  ])('has SciPy’s point %d', (index, published) => {
    const sequence = new ScrambledSobol(MOST_DIMENSIONS, 1)
    const gray = index ^ (index >> 1)
    const point = [0, 1, 2, 9, 20, 38, 47].map((d) => (sequence.bits(d, gray) >>> 0) / 2 ** 32)
    expect(point).toEqual(published)
  })
})

describe('the scrambled Sobol sequence', () => {
  it('keeps one point in each of 256 equal cells, in every dimension and for every seed', () => {
    for (const seed of [1, 2, 77]) {
      const sequence = new ScrambledSobol(MOST_DIMENSIONS, seed)
      const point = new Float64Array(MOST_DIMENSIONS)
      const cells = Array.from({ length: MOST_DIMENSIONS }, () => new Set<number>())
      for (let i = 0; i < 256; i++) {
        sequence.point(i, point)
        point.forEach((value, d) => cells[d].add(Math.floor(value * 256)))
      }
      expect(cells.map((cell) => cell.size)).toEqual(Array(MOST_DIMENSIONS).fill(256))
    }
  })

  it('keeps one point in each of 16 by 16 cells of the first two dimensions', () => {
    const sequence = new ScrambledSobol(2, 5)
    const point = new Float64Array(2)
    const cells = new Set<number>()
    for (let i = 0; i < 256; i++) {
      sequence.point(i, point)
      cells.add(Math.floor(point[0] * 16) * 16 + Math.floor(point[1] * 16))
    }
    expect(cells.size).toBe(256)
  })
})

describe('the normal quantile', () => {
  // SciPy 1.17, stats.norm.ppf
  it.each([
    [1e-9, -5.9978070150076865],
    [0.001, -3.090232306167813],
    [0.02, -2.053748910631823],
    [0.3, -0.5244005127080409],
    [0.5, 0],
    [0.9, 1.2815515655446004],
    [0.999999, 4.753424308817087],
  ])('of %d is %d', (share, published) => {
    expect(Math.abs(normalQuantile(share) - published)).toBeLessThan(2e-9)
  })
})
