import { fixtureBytes } from './fixture.ts'

/** One invented field: a quantity's code (category, number), its level in Pa, lead time and values. */
export interface SyntheticField {
  code: readonly [number, number]
  pressure: number
  hours: number
  values: readonly number[]
}

export const CODES = {
  temperature: [0, 0],
  relativeHumidity: [1, 1],
  specificHumidity: [1, 0],
  windEast: [2, 2],
  windNorth: [2, 3],
  geopotential: [3, 4],
  geopotentialHeight: [3, 5],
} as const

/** Section 3 of the n-th message of a fixture. */
export function gridSection(fixture: string, nth: number): Buffer {
  const file = fixtureBytes(fixture)
  let at = 0
  for (let message = 0; message < nth; message++) at += Number(file.readBigUInt64BE(at + 8))
  at += 16
  while (file[at + 4] !== 3) at += file.readUInt32BE(at)
  return Buffer.from(file.subarray(at, at + file.readUInt32BE(at)))
}

/** A latitude-longitude grid from its north-west corner, degrees, with equal steps. */
export function latLonSection(
  columns: number,
  rows: number,
  north: number,
  west: number,
  step: number,
): Buffer {
  const section = Buffer.from(gridSection('scanning', 0))
  const micro = (degrees: number) =>
    Math.round(Math.abs(degrees) * 1e6) + (degrees < 0 ? 2 ** 31 : 0)
  const south = north - step * (rows - 1)
  const east = (west + step * (columns - 1)) % 360
  section.writeUInt32BE(columns * rows, 6)
  section.writeUInt32BE(columns, 30)
  section.writeUInt32BE(rows, 34)
  for (const [octet, degrees] of [
    [47, north],
    [51, west],
    [56, south],
    [60, east],
    [64, step],
    [68, step],
  ]) {
    section.writeUInt32BE(micro(degrees), octet - 1)
  }
  return section
}

/** A GRIB edition 2 message with simple packing of 32 bits; NaN becomes a gap in a bitmap. */
export function syntheticMessage(grid: Buffer, field: SyntheticField): Buffer {
  const numbers = field.values.filter((value) => !Number.isNaN(value))
  const least = Math.fround(numbers.reduce((a, b) => Math.min(a, b), Infinity) - 1)
  const reference = Number.isFinite(least) ? least : 0
  const identification = section(1, Buffer.from('0007000002010107db010a0c00000001', 'hex'))
  const product = Buffer.alloc(29)
  product.writeUInt16BE(0, 2)
  product[4] = field.code[0]
  product[5] = field.code[1]
  product[6] = 2
  product[12] = 1 // hours
  product.writeUInt32BE(field.hours, 13)
  product[17] = 100
  product.writeUInt32BE(field.pressure, 19)
  product.fill(255, 23)
  const representation = Buffer.alloc(16)
  representation.writeUInt32BE(numbers.length, 0)
  representation.writeFloatBE(reference, 6)
  representation.writeUInt16BE(0x8000 + 20, 10) // E = −20
  representation[14] = 32
  const data = Buffer.alloc(numbers.length * 4)
  numbers.forEach((value, index) =>
    data.writeUInt32BE(Math.round((value - reference) * 2 ** 20), index * 4),
  )
  const bitmap = Buffer.alloc(Math.ceil(field.values.length / 8))
  field.values.forEach((value, index) => {
    if (!Number.isNaN(value)) bitmap[index >> 3] |= 0x80 >> (index & 7)
  })
  const whole = numbers.length === field.values.length
  const body = Buffer.concat([
    identification,
    grid,
    section(4, product),
    section(5, representation),
    section(6, whole ? Buffer.from([255]) : Buffer.concat([Buffer.from([0]), bitmap])),
    section(7, data),
    Buffer.from('7777'),
  ])
  const indicator = Buffer.from('GRIB\0\0\0\x02________', 'latin1')
  indicator.writeBigUInt64BE(BigInt(body.length + 16), 8)
  return Buffer.concat([indicator, body])
}

function section(number: number, content: Buffer): Buffer {
  const head = Buffer.alloc(5)
  head.writeUInt32BE(content.length + 5)
  head[4] = number
  return Buffer.concat([head, content])
}
