import { describe, expect, it } from 'vitest'
import { cellOf, type BufrBlock, type Cell } from '../../src/soundings/bufrBlock.ts'
import { bufrSubsets, stepsFor } from '../../src/soundings/bufrData.ts'
import { BufrError } from '../../src/soundings/bufrError.ts'
import { bufrMessages } from '../../src/soundings/bufrMessage.ts'
import { fixture } from '../soundings/samples.ts'

/** All values of a subset by descriptor, in their order. */
type Values = Map<number, Cell[]>

function add(values: Values, descriptor: number, cell: Cell): void {
  const isFactor = Math.floor(descriptor / 1000) === 31 // the reference lists these apart
  if (!isFactor) values.set(descriptor, [...(values.get(descriptor) ?? []), cell])
}

function collect(block: BufrBlock, subset: number, values: Values): Values {
  for (const element of block.elements) add(values, element.descriptor, cellOf(element, subset))
  for (const inner of block.blocks) collect(inner, subset, values)
  return values
}

function decoded(name: string): Values[] {
  const bytes = fixture(`${name}.bufr`)
  const subsets: Values[] = []
  for (const message of bufrMessages(bytes)) {
    if (message instanceof BufrError) throw message
    for (const { block, subset } of bufrSubsets(message, stepsFor(bytes.length))) {
      subsets.push(collect(block, subset, new Map()))
    }
  }
  return subsets
}

/** What the reference decoder makes of the file: lines of subset, descriptor and value. */
function expected(name: string): Values[] {
  const subsets: Values[] = []
  const [, ...lines] = new TextDecoder()
    .decode(fixture(`${name}.expected.csv`))
    .trim()
    .split('\n')
  for (const line of lines) {
    const [, subset, descriptor, value] = /^(\d+),(\d+),(.*)$/.exec(line) ?? []
    const values = (subsets[Number(subset) - 1] ??= new Map<number, Cell[]>())
    add(values, Number(descriptor), value === '' ? null : (JSON.parse(value) as Cell))
  }
  return subsets
}

/**
 * Every value of every message against the reference decoder (bufr_dump of ecCodes 2.28.0, Debian
 * package libeccodes-tools). It prints six digits, hence the tolerance: half a unit of the sixth.
 */
describe('BUFR against the reference decoder', () => {
  it.each([
    // A real message: edition 4, 3 09 052 with elements appended, 127 levels.
    ['temp-giles-2016-02-18', 1, 1308],
    // Part of the Point Barrow ascent, encoded by the reference library.
    ['barrow-309052', 1, 295],
    ['barrow-309057', 1, 322],
    ['barrow-309007-edition3', 1, 201],
    ['three-subsets-compressed', 3, 324],
    // Operators 2 01, 2 02, 2 03, 2 04, 2 07 and 2 08; two subsets of different length; wind as u and v.
    ['operators', 2, 52],
    ['operators-compressed', 2, 58],
    // Operator 2 22 with a bit map and per cent confidences; a replication without delay.
    ['quality', 1, 34],
  ])('%s: %i subsets, %i values', (name, subsets, count) => {
    const ours = decoded(name)
    const theirs = expected(name)
    expect(ours).toHaveLength(subsets)
    let compared = 0
    for (const [index, values] of theirs.entries()) {
      expect([...ours[index].keys()].sort()).toEqual([...values.keys()].sort())
      for (const [descriptor, wanted] of values) {
        const cells = ours[index].get(descriptor) ?? []
        expect(cells, String(descriptor)).toHaveLength(wanted.length)
        for (const [place, want] of wanted.entries()) {
          const cell = cells[place]
          const at = `${descriptor} number ${place + 1} of subset ${index + 1}`
          if (typeof want === 'number' && typeof cell === 'number') {
            expect(Math.abs(cell - want), at).toBeLessThanOrEqual(5e-6 * Math.abs(want))
          } else if (typeof cell === 'string') expect(cell, at).toBe(want)
          else expect(cell, at).toBe(want)
          compared++
        }
      }
    }
    expect(compared).toBe(count)
  })
})
