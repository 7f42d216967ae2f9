import { expect, test } from 'vitest'
import { classify } from '../../src/physics/icaoClass.ts'

// ICAO Annex 2, appendix on unmanned free balloons; Regulation (EU) 923/2012, appendix 2.
const box = (mass: number, smallestFace: number | null = 0.04) => ({
  name: 'Box',
  mass,
  smallestFace,
})

test('a payload under 4 kg is light, from 4 kg medium, from 6 kg heavy', () => {
  expect(classify(3.999, [box(1.9), box(1.9)], 100).class).toBe('light')
  expect(classify(4, [box(2), box(2)], 100).class).toBe('medium')
  expect(classify(5.999, [box(2.9), box(2.9)], 100).class).toBe('medium')
  expect(classify(6, [box(2), box(2), box(2)], 100).class).toBe('heavy')
})

test('one package of 3 kg makes it heavy', () => {
  expect(classify(3.2, [box(2.999)], 100).class).toBe('light')
  expect(classify(3.2, [box(3)], 100).class).toBe('heavy')
})

test('a package of 2 kg with more than 13 g/cm² over its smallest face makes it heavy', () => {
  expect(classify(2.5, [box(2, 2000 / 13 / 1e4)], 100).class).toBe('light')
  expect(classify(2.5, [box(2, 2000 / 13.1 / 1e4)], 100).class).toBe('heavy')
  expect(classify(2.5, [box(1.999, 0.001)], 100).class).toBe('light')
})

test('a suspension that needs 230 N or more to part makes it heavy', () => {
  expect(classify(1, [box(1)], 229).class).toBe('light')
  const { class: heavy, reasons } = classify(1, [box(1)], 230)
  expect(heavy).toBe('heavy')
  expect(reasons).toEqual(['the line parts at 230 N, 230 N or more'])
})

test('what is not known is named', () => {
  expect(classify(2.4, [box(2.1, null)], null)).toEqual({
    class: 'light',
    reasons: ['the payload of 2.4 kg is under 4 kg'],
    missing: ['the smallest face of Box', 'the force at which the line parts'],
  })
})
