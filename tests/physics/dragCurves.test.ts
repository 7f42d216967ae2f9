import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { dragCurve, type DragChoice } from '../../src/physics/dragCurves.ts'

const CHOICES: DragChoice[] = [
  { curve: 'sounding-balloon' },
  { curve: 'smooth-sphere' },
  { curve: 'constant', coefficient: 0.3 },
]

describe.each(CHOICES)('$curve', (choice) => {
  const drag = dragCurve(choice)

  test('the Reynolds number found meets the given Cd·Re²', () => {
    fc.assert(
      fc.property(fc.double({ min: 2, max: 30, noNaN: true }), (logBest) => {
        const reynolds = drag.reynolds(Math.exp(logBest))
        const met = Math.log(drag.coefficient(reynolds) * reynolds * reynolds)
        expect(Math.abs(met - logBest)).toBeLessThan(1e-7)
      }),
      { numRuns: 500 },
    )
  })

  test('more force never means less speed', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 2, max: 30, noNaN: true }),
        fc.double({ min: 1e-6, max: 2, noNaN: true }),
        (logBest, more) => {
          expect(drag.reynolds(Math.exp(logBest + more))).toBeGreaterThan(
            drag.reynolds(Math.exp(logBest)),
          )
        },
      ),
    )
  })
})

test('in the drag crisis the slowest of the speeds is found', () => {
  const sphere = dragCurve({ curve: 'smooth-sphere' })
  // Cd·Re² at Re = 2.2e5, before the crisis, is met again after it.
  const best = sphere.coefficient(2.2e5) * 2.2e5 ** 2
  expect(sphere.reynolds(best)).toBeCloseTo(2.2e5, -1)
  expect(sphere.coefficient(5e5) * 5e5 ** 2).toBeLessThan(best * 1.5)
})
