/** What a column of a sounding in CSV may hold. */
export type Quantity =
  | 'pressure'
  | 'geopotentialHeight'
  | 'altitude'
  | 'temperature'
  | 'dewPoint'
  | 'relativeHumidity'
  | 'windFrom'
  | 'windSpeed'
  | 'elapsed'
  | 'time'
  | 'latitude'
  | 'longitude'

/** A number in the column's unit to SI. */
type Conversion = (value: number) => number

/** What one heading turned out to be. */
export type Heading =
  | { kind: 'understood'; quantity: Quantity; toSi: Conversion }
  | { kind: 'unit-unknown'; quantity: Quantity }
  | { kind: 'unused' }

interface Wanted {
  quantity: Quantity
  /** A heading that is always understood, for messages */
  example: string
  /** Names and units in any spelling, letters and digits only */
  names: readonly string[]
  units: Readonly<Record<string, Conversion>>
}

const DEGREE = Math.PI / 180
const FOOT = 0.3048 // international foot, m
const KNOT = 1852 / 3600 // m/s
const same: Conversion = (value) => value
const times =
  (factor: number): Conversion =>
  (value) =>
    value * factor

const METRES: Wanted['units'] = {
  ...spelled(same, 'm meter meters metre metres gpm'),
  ...spelled(times(1000), 'km kilometer kilometers kilometre kilometres'),
  ...spelled(times(FOOT), 'ft feet foot'),
}
const KELVINS: Wanted['units'] = {
  ...spelled(same, 'k kelvin degk'),
  ...spelled(
    (value) => value + 273.15,
    'c degc celsius degcelsius degreec degreesc degreescelsius',
  ),
  ...spelled(
    (value) => ((value - 32) * 5) / 9 + 273.15,
    'f degf fahrenheit degfahrenheit degreef degreesf degreesfahrenheit',
  ),
}
const DEGREES: Wanted['units'] = spelled(
  times(DEGREE),
  'deg degree degrees degt degtrue degreestrue degreetrue',
)

const WANTED: readonly Wanted[] = [
  {
    quantity: 'pressure',
    example: 'pressure_hPa',
    names: ['pressure', 'airpressure', 'atmosphericpressure', 'press', 'pres', 'p'],
    units: {
      ...spelled(same, 'pa pascal pascals'),
      ...spelled(times(100), 'hpa hectopascal hectopascals mb mbar millibar millibars'),
      ...spelled(times(1000), 'kpa kilopascal kilopascals'),
    },
  },
  {
    quantity: 'geopotentialHeight',
    example: 'geopotential height_m',
    names: ['geopotentialheight', 'geopotentialaltitude', 'geopotheight', 'gph', 'height', 'hght'],
    units: METRES,
  },
  {
    quantity: 'altitude',
    example: 'altitude_m',
    names: [
      'altitude',
      'alt',
      'geometricaltitude',
      'geometricheight',
      'gpsaltitude',
      'gnssaltitude',
    ],
    units: METRES,
  },
  {
    quantity: 'temperature',
    example: 'temperature_C',
    names: ['temperature', 'airtemperature', 'temp', 'airtemp', 'drybulbtemperature', 't'],
    units: KELVINS,
  },
  {
    quantity: 'dewPoint',
    example: 'dew point temperature_C',
    names: ['dewpointtemperature', 'dewpoint', 'dewpointtemp', 'dwpt', 'td'],
    units: KELVINS,
  },
  {
    quantity: 'relativeHumidity',
    example: 'relative humidity_%',
    names: ['relativehumidity', 'humidity', 'rh', 'relh'],
    units: spelled(times(0.01), '% percent pct'),
  },
  {
    quantity: 'windFrom',
    example: 'wind direction_degree',
    names: [
      'winddirection',
      'winddir',
      'windfromdirection',
      'windfrom',
      'wdir',
      'wd',
      'drct',
      'dd',
    ],
    units: DEGREES,
  },
  {
    quantity: 'windSpeed',
    example: 'wind speed_m/s',
    names: ['windspeed', 'windspd', 'wspd', 'wind', 'ws', 'ff'],
    units: {
      ...spelled(same, 'ms ms1 mps meterspersecond metrespersecond'),
      ...spelled(times(KNOT), 'kt kts kn knot knots'),
      ...spelled(times(1 / 3.6), 'kmh kmh1 kph kmph'),
    },
  },
  {
    quantity: 'elapsed',
    example: 'elapsed time_s',
    names: ['elapsedtime', 'elapsed', 'timesincerelease', 'timesincelaunch', 'flighttime', 'time'],
    units: {
      ...spelled(same, 's sec second seconds'),
      ...spelled(times(60), 'min minute minutes'),
    },
  },
  {
    quantity: 'time',
    example: 'time',
    names: ['time', 'datetime', 'dateandtime', 'timestamp', 'validat', 'validtime'],
    units: spelled(same, ' utc gmt z'),
  },
  {
    quantity: 'latitude',
    example: 'latitude',
    names: ['latitude', 'lat'],
    units: { '': times(DEGREE), ...DEGREES, ...spelled(times(DEGREE), 'degn degreesnorth') },
  },
  {
    quantity: 'longitude',
    example: 'longitude',
    names: ['longitude', 'long', 'lon', 'lng'],
    units: { '': times(DEGREE), ...DEGREES, ...spelled(times(DEGREE), 'dege degreeseast') },
  },
]

/** A heading as examples of what is understood, for the message where one is refused. */
export const understoodHeadings: readonly string[] = WANTED.map(({ example }) => example)

/** Short words after a quantity's name that make it another quantity. */
const BESIDE = new Set('flag qc std sd err min max mean gust id type name step zone'.split(' '))

/** Longer words are another quantity's, unless they are units of the trade that are not understood. */
const LONGEST_UNIT = 4
const FOREIGN_UNITS = new Set('rankine radian radians beaufort miles fathoms'.split(' '))

/** Quantities that a profile can do without, so that a column of theirs may be left unused. */
const SPARE = new Set<Quantity>(['elapsed', 'time', 'latitude', 'longitude'])

/**
 * What a heading stands for, whatever its case, spacing, order of brackets and separators:
 * `Temperature [°C]`, `temperature_C`, `TEMPERATURE, C` and `temperatureC` are one.
 */
export function readHeading(heading: string): Heading {
  const plain = heading.normalize('NFKC').replace(/[°º˚]/g, 'deg').toLowerCase()
  const compact = plain.replace(/[^\p{L}\d%]/gu, '')
  const matches = WANTED.flatMap(({ quantity, names, units }) =>
    names
      .filter((name) => compact.startsWith(name))
      .map((name) => ({ quantity, name, toSi: lookUp(units, compact.slice(name.length)) })),
  ).sort((a, b) => b.name.length - a.name.length)

  for (const { quantity, toSi } of matches) {
    if (toSi) return { kind: 'understood', quantity, toSi }
  }
  for (const { quantity, name } of matches) {
    if (!SPARE.has(quantity) && endsInUnit(plain, name)) return { kind: 'unit-unknown', quantity }
  }
  return { kind: 'unused' }
}

/**
 * True where nothing but an unknown unit stands after a quantity's name: nothing at all, something
 * in brackets, or one word such as units are.
 */
function endsInUnit(plain: string, name: string): boolean {
  const bracketed = /^([^([{]*)[([{][^)\]}]*[)\]}]\s*$/.exec(plain)
  const words = (bracketed ? bracketed[1] : plain).split(/[^\p{L}\d%/]+/u).filter(Boolean)
  if (words.join('') === name) return true
  const last = words.pop() ?? ''
  if (bracketed || words.join('') !== name || BESIDE.has(last)) return false
  return last.length <= LONGEST_UNIT || FOREIGN_UNITS.has(last)
}

function lookUp(units: Wanted['units'], spelling: string): Conversion | undefined {
  return Object.hasOwn(units, spelling) ? units[spelling] : undefined
}

function spelled(conversion: Conversion, spellings: string): Record<string, Conversion> {
  return Object.fromEntries(spellings.split(' ').map((spelling) => [spelling, conversion]))
}
