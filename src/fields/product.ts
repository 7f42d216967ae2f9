import { STANDARD_GRAVITY } from '../physics/constants.ts'
import { damaged, UnsupportedGrib } from './gribError.ts'
import { type FieldSections } from './sections.ts'

/** What a plane of gridded values holds, SI. */
export type Quantity =
  | 'temperature'
  | 'geopotentialHeight'
  | 'relativeHumidity'
  | 'specificHumidity'
  | 'windEast'
  | 'windNorth'

/** Which run of which model a message comes from. */
export interface Origin {
  /** Originating centre, common code table C-11 */
  centre: number
  subCentre: number
  /** Identifier of the analysis or forecast process, defined by the centre */
  process: number
}

/** What one message says about itself. Times in s since 1970 UTC. */
export interface Product {
  quantity: Quantity
  /** Factor that brings the stored values to SI */
  unit: number
  /** Pa */
  pressure: number
  referenceTime: number
  validTime: number
  origin: Origin
}

/** Discipline, category, number of WMO code table 4.2: what is read and its factor to SI. */
const QUANTITIES: Readonly<Record<string, { quantity: Quantity; unit: number }>> = {
  '0-0-0': { quantity: 'temperature', unit: 1 }, // K
  '0-1-0': { quantity: 'specificHumidity', unit: 1 }, // kg/kg
  '0-1-1': { quantity: 'relativeHumidity', unit: 0.01 }, // %
  '0-2-2': { quantity: 'windEast', unit: 1 }, // m/s
  '0-2-3': { quantity: 'windNorth', unit: 1 }, // m/s
  '0-3-4': { quantity: 'geopotentialHeight', unit: 1 / STANDARD_GRAVITY }, // m²/s²
  '0-3-5': { quantity: 'geopotentialHeight', unit: 1 }, // gpm
}

/** Code table 4.4: seconds in a unit of time. Months and longer have no fixed length. */
const TIME_UNITS: Readonly<Record<number, number | undefined>> = {
  0: 60,
  1: 3600,
  2: 86_400,
  10: 10_800,
  11: 21_600,
  12: 43_200,
  13: 1,
}

/** Code table 4.5: a surface of constant pressure; 255 is a surface that is not given. */
const ISOBARIC = 100
const NO_SURFACE = 255

/**
 * Identifies a message: sections 0, 1 and 4.
 * @throws UnsupportedGrib with the reason where it is not a quantity of the air at one pressure and time.
 */
export function readProduct(sections: FieldSections): Product {
  const { product, identification } = sections
  const template = product.u16(8)
  const parameter = `${sections.discipline}-${product.u8(10)}-${product.u8(11)}`
  if (template !== 0) {
    throw new UnsupportedGrib(`parameter ${parameter}: product template 4.${template}`)
  }
  const known = Object.hasOwn(QUANTITIES, parameter) ? QUANTITIES[parameter] : undefined
  if (!known)
    throw new UnsupportedGrib(`parameter ${parameter}: not a quantity of the flight's air`)
  const surface = product.u8(23)
  if (surface !== ISOBARIC || product.u8(29) !== NO_SURFACE) {
    const kind = product.u8(29) === NO_SURFACE ? `surface type ${surface}` : 'a layer'
    throw new UnsupportedGrib(`parameter ${parameter}: on ${kind}, not on a pressure level`)
  }
  const pressure = product.scaled(24)
  if (!(pressure >= 0.01 && pressure <= 200_000)) {
    throw damaged(`a pressure level of ${pressure} Pa`)
  }
  const timeUnit = TIME_UNITS[product.u8(18)]
  if (timeUnit === undefined) {
    throw new UnsupportedGrib(`parameter ${parameter}: forecast time in unit ${product.u8(18)}`)
  }
  const referenceTime = readTime(sections)
  return {
    ...known,
    pressure,
    referenceTime,
    validTime: referenceTime + product.s32(19) * timeUnit,
    origin: {
      centre: identification.u16(6),
      subCentre: identification.u16(8),
      process: product.u8(14),
    },
  }
}

/** Section 1, octets 13 to 19: the reference time in s since 1970 UTC. */
function readTime({ identification }: FieldSections): number {
  const [month, day, hour, minute, second] = [15, 16, 17, 18, 19].map((octet) =>
    identification.u8(octet),
  )
  const year = identification.u16(13)
  const time = Date.UTC(year, month - 1, day, hour, minute, second)
  const valid = new Date(time)
  const isReal =
    year >= 1000 &&
    valid.getUTCMonth() === month - 1 &&
    valid.getUTCDate() === day &&
    valid.getUTCHours() === hour &&
    minute < 60 &&
    second <= 60
  if (!isReal) throw damaged(`a reference time of ${[year, month, day, hour, minute].join(' ')}`)
  return time / 1000
}
