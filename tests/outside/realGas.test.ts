import { describe, expect, it } from 'vitest'
import { MOLAR_GAS_CONSTANT } from '../../src/physics/constants.ts'
import { compressibility, molesIn } from '../../src/physics/realGas.ts'

describe('compressibility of helium', () => {
  // A gas encyclopaedia's table, as quoted in public lecture slides.
  it.each([
    [288.15, 50, 1.0244],
    [288.15, 100, 1.0487],
    [288.15, 150, 1.0727],
    [288.15, 200, 1.0965],
    [323.15, 100, 1.0429],
    [323.15, 200, 1.0851],
  ])('at %d K and %d bar is the published %d within 0.0006', (temperature, bar, published) => {
    const z = compressibility('helium', temperature, bar * 1e5)
    expect(Math.abs(z - published)).toBeLessThan(6e-4)
  })

  // CoolProp 8.0.0, an open library of fluid properties, with the same equation of state.
  it.each([
    [288.15, 300, 1.1439788508],
    [253.15, 200, 1.111598769],
    [323.15, 300, 1.1269690688],
  ])('at %d K and %d bar is the library’s %d', (temperature, bar, published) => {
    expect(compressibility('helium', temperature, bar * 1e5)).toBeCloseTo(published, 6)
  })
})

describe('compressibility of hydrogen', () => {
  // Lemmon, Huber and Leachman, J. Res. NIST 113, 2008, check values of eq. 2 (from memory).
  it.each([
    [200, 1, 1.0067545],
    [300, 10, 1.05985282],
    [400, 50, 1.24304763],
  ])('at %d K and %d MPa is the paper’s own %d', (temperature, megapascals, published) => {
    const z = compressibility('hydrogen', temperature, megapascals * 1e6)
    expect(Math.abs(z - published)).toBeLessThan(1e-7)
  })

  // CoolProp 8.0.0 with the reference equation of state of normal hydrogen, which eq. 2 approximates.
  it.each([
    [300, 200, 1.12250284],
    [288.15, 300, 1.19340266],
    [253.15, 200, 1.1392173],
    [323.15, 300, 1.17545939],
  ])('at %d K and %d bar is the reference equation’s %d within 1e-3', (temperature, bar, z) => {
    expect(Math.abs(compressibility('hydrogen', temperature, bar * 1e5) - z)).toBeLessThan(1e-3)
  })
})

describe('the ideal-gas sum at 200 bar and 15 °C', () => {
  it.each([
    ['helium', 0.097],
    ['hydrogen', 0.126],
  ] as const)('counts too much %s, by about %d', (kind, excess) => {
    const ideal = (2e7 * 0.05) / (MOLAR_GAS_CONSTANT * 288.15)
    const real = molesIn(kind, 0.05, 288.15, 2e7)
    expect(Math.abs(ideal / real - 1 - excess)).toBeLessThan(1e-3)
  })
})
