import { BufrError } from './bufrError.ts'
import { tableB } from './bufrTableB.ts'
import { tableD } from './bufrTableD.ts'

/** An element of table B: what one value in a message is. */
export interface ElementEntry {
  kind: 'number' | 'code' | 'characters'
  scale: number
  reference: number
  /** Bits */
  width: number
}

const KINDS = { n: 'number', c: 'code', s: 'characters' } as const

const elements = new Map<number, ElementEntry>()
for (const [, code, kind, scale, reference, width] of tableB.matchAll(
  /(\d{6})([ncs])(-?\d+),(-?\d+),(\d+)/g,
)) {
  elements.set(Number(code), {
    kind: KINDS[kind as keyof typeof KINDS],
    scale: Number(scale),
    reference: Number(reference),
    width: Number(width),
  })
}

const sequences = new Map<number, readonly number[]>()
for (const [, code, members] of tableD.replaceAll(',\n', ',').matchAll(/(\d{6})=([\d,]+)/g)) {
  sequences.set(Number(code), members.split(',').map(Number))
}

/** Descriptors are FXXYYY as one number: 0 12 101 is 12101, 3 09 052 is 309052. */
export function element(descriptor: number): ElementEntry {
  const entry = elements.get(descriptor)
  if (!entry) throw new BufrError(`element ${spelled(descriptor)} is not known`)
  return entry
}

/** The descriptors that a sequence stands for. */
export function sequence(descriptor: number): readonly number[] {
  const members = sequences.get(descriptor)
  if (!members) throw new BufrError(`sequence ${spelled(descriptor)} is not known`)
  return members
}

/** A descriptor as the manual writes it. */
export function spelled(descriptor: number): string {
  const digits = String(descriptor).padStart(6, '0')
  return `${digits.slice(0, 1)} ${digits.slice(1, 3)} ${digits.slice(3)}`
}
