import { describe, expect, it } from 'vitest'
import { readHeading } from '../../src/soundings/csvHeadings.ts'

const DEGREE = Math.PI / 180

describe('a heading', () => {
  it.each([
    ['pressure_hPa', 'pressure', 850, 85_000],
    ['PRESSURE [hPa]', 'pressure', 850, 85_000],
    ['Pressure (Pa)', 'pressure', 85_000, 85_000],
    ['pressure kPa', 'pressure', 85, 85_000],
    ['pressure, mbar', 'pressure', 850, 85_000],
    ['pressureHPa', 'pressure', 850, 85_000],
    ['geopotential height_m', 'geopotentialHeight', 1457, 1457],
    ['Geopotential_Height [km]', 'geopotentialHeight', 1.457, 1457],
    ['geopotential height (ft)', 'geopotentialHeight', 1000, 304.8],
    ['geopotentialHeightM', 'geopotentialHeight', 1457, 1457],
    ['height_m', 'geopotentialHeight', 1457, 1457],
    ['altitude_m', 'altitude', 1457, 1457],
    ['Altitude, ft', 'altitude', 1000, 304.8],
    ['temperature_C', 'temperature', 15, 288.15],
    ['Temperature [°C]', 'temperature', 15, 288.15],
    ['TEMPERATURE K', 'temperature', 288.15, 288.15],
    ['temperature (F)', 'temperature', 59, 288.15],
    ['air temperature / degC', 'temperature', 15, 288.15],
    ['dew point temperature_C', 'dewPoint', 15, 288.15],
    ['Dewpoint_K', 'dewPoint', 288.15, 288.15],
    ['dewPointK', 'dewPoint', 288.15, 288.15],
    ['relative humidity_%', 'relativeHumidity', 65, 0.65],
    ['RH %', 'relativeHumidity', 65, 0.65],
    ['relativeHumidityPercent', 'relativeHumidity', 65, 0.65],
    ['wind direction_degree', 'windFrom', 270, 270 * DEGREE],
    ['Wind Direction (°)', 'windFrom', 270, 270 * DEGREE],
    ['windFromDeg', 'windFrom', 270, 270 * DEGREE],
    ['wind speed_m/s', 'windSpeed', 10, 10],
    ['wind speed (m s⁻¹)', 'windSpeed', 10, 10],
    ['windSpeedMs', 'windSpeed', 10, 10],
    ['Wind Speed [kt]', 'windSpeed', 10, 5.144444],
    ['wind_speed_km/h', 'windSpeed', 36, 10],
    ['elapsed time_s', 'elapsed', 90, 90],
    ['time (s)', 'elapsed', 90, 90],
    ['time [min]', 'elapsed', 1.5, 90],
    ['latitude', 'latitude', 45, 45 * DEGREE],
    ['lon_deg', 'longitude', -45, -45 * DEGREE],
  ])('%s is %s', (heading, quantity, value, si) => {
    const read = readHeading(heading)
    if (read.kind !== 'understood') throw new Error(read.kind)
    expect(read.quantity).toBe(quantity)
    expect(read.toSi(value)).toBeCloseTo(si, 6)
  })

  it.each(['time', 'Time UTC', 'datetime', 'validAt'])('%s is a time', (heading) => {
    expect(readHeading(heading)).toMatchObject({ kind: 'understood', quantity: 'time' })
  })

  it.each([
    ['temperature', 'temperature'],
    ['temperature_X', 'temperature'],
    ['Temperature [°R]', 'temperature'],
    ['temperature_rankine', 'temperature'],
    ['pressure_psi', 'pressure'],
    ['pressure_inHg', 'pressure'],
    ['geopotential height', 'geopotentialHeight'],
    ['altitude [FL]', 'altitude'],
    ['wind speed', 'windSpeed'],
    ['wind speed_Bft', 'windSpeed'],
    ['wind direction (rad)', 'windFrom'],
    ['RH', 'relativeHumidity'],
  ])('%s does not tell its unit', (heading, quantity) => {
    expect(readHeading(heading)).toEqual({ kind: 'unit-unknown', quantity })
  })

  it.each([
    'ice point temperature_C',
    'humidity wrt ice_%',
    'mixing ratio_g/kg',
    'potential temperature_K',
    'virtual temperature_C',
    'pressure altitude_ft',
    'height above ground_m',
    'temperature_uncertainty',
    'temperature_flag',
    'wind speed max_m/s',
    'time zone',
    'station',
    '',
    'constructor',
  ])('%s is of no use', (heading) => {
    expect(readHeading(heading)).toEqual({ kind: 'unused' })
  })
})
