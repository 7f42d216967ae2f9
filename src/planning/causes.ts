import { MEMBER, MEMBER_VALUES } from './memberFlights.ts'
import { SCALAR_INPUTS, type Input, type Spread } from './spread.ts'

/** How much of the variance of the landing place an input makes by itself. */
export interface Cause {
  input: Input
  /** 0 to 1: its first-order Sobol index, east and north together */
  varianceShare: number
}

/**
 * First-order Sobol indices of the landing place: the variance that each input explains by itself in a
 * least-squares fit of Hermite polynomials to the second degree (Sudret, Reliab. Eng. Syst. Saf. 93, 2008,
 * p. 964), the wind by the drift that its error makes on the nominal flight. East and north are taken
 * together: the trace of the covariance (Lamboni, Monod and Makowski, Reliab. Eng. Syst. Saf. 96, 2011,
 * p. 450). What is left to 1 comes from inputs acting together. `members`: rows of MEMBER_VALUES;
 * `offsets`: east and north of each landing, m, NaN where it did not fly.
 */
export function causesOf(members: Float64Array, offsets: Float64Array, spread: Spread): Cause[] {
  const terms = termsOf(spread)
  const inputs = [...new Set(terms.map((term) => term.input))]
  const size = terms.length + 1
  const count = members.length / MEMBER_VALUES

  // Normal equations of both components, with the means among the unknowns.
  const matrix = new Float64Array(size * size)
  const right = [new Float64Array(size), new Float64Array(size)]
  const row = new Float64Array(size)
  const squares = [0, 0]
  let flown = 0
  for (let member = 0; member < count; member++) {
    if (Number.isNaN(offsets[2 * member])) continue
    flown++
    row[0] = 1
    terms.forEach((term, i) => {
      row[i + 1] = term.value(members, member * MEMBER_VALUES)
    })
    for (let i = 0; i < size; i++) {
      for (let j = 0; j <= i; j++) matrix[i * size + j] += row[i] * row[j]
      for (let side = 0; side < 2; side++) right[side][i] += row[i] * offsets[2 * member + side]
    }
    for (let side = 0; side < 2; side++) squares[side] += offsets[2 * member + side] ** 2
  }
  const means = right.map((sums) => sums[0] / flown)
  const variance = squares[0] / flown - means[0] ** 2 + squares[1] / flown - means[1] ** 2
  if (!(variance > 0)) return inputs.map((input) => ({ input, varianceShare: 0 }))

  const covariance = (i: number, j: number) =>
    matrix[Math.max(i, j) * size + Math.min(i, j)] / flown -
    (matrix[i * size] / flown) * (matrix[j * size] / flown)
  const solutions = right.map((sums) => solve(matrix, sums))
  const causes = inputs.map((input): Cause => {
    const own = terms.flatMap((term, i) => (term.input === input ? [i + 1] : []))
    let explained = 0
    for (const solution of solutions) {
      for (const i of own) {
        for (const j of own) explained += solution[i] * solution[j] * covariance(i, j)
      }
    }
    return { input, varianceShare: Math.min(1, explained / variance) }
  })
  return causes.sort((a, b) => b.varianceShare - a.varianceShare)
}

interface Term {
  input: Input
  value: (members: Float64Array, at: number) => number
}

function termsOf(spread: Spread): Term[] {
  const scalars = SCALAR_INPUTS.flatMap((input, i): Term[] => {
    if (spread[input] === 0) return []
    const at = MEMBER.inputs + i
    return [
      { input, value: (members, base) => members[base + at] },
      // Second Hermite polynomial, normalised
      { input, value: (members, base) => (members[base + at] ** 2 - 1) / Math.SQRT2 },
    ]
  })
  if (spread.wind === 0) return scalars
  return [
    ...scalars,
    // In kilometres, to keep the equations well conditioned
    { input: 'wind', value: (members, base) => members[base + MEMBER.windEast] / 1000 },
    { input: 'wind', value: (members, base) => members[base + MEMBER.windNorth] / 1000 },
  ]
}

/** Solves a symmetric positive definite system given by its lower triangle, by Cholesky's method. */
function solve(lower: Float64Array, right: Float64Array): Float64Array {
  const size = right.length
  const factor = Float64Array.from(lower)
  const x = Float64Array.from(right)
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      let rest = factor[i * size + j]
      for (let k = 0; k < j; k++) rest -= factor[i * size + k] * factor[j * size + k]
      // A column that the others already make is left out.
      if (i === j)
        factor[i * size + i] = rest > 1e-9 * lower[i * size + i] ? Math.sqrt(rest) : Infinity
      else factor[i * size + j] = rest / factor[j * size + j]
    }
  }
  for (let i = 0; i < size; i++) {
    for (let k = 0; k < i; k++) x[i] -= factor[i * size + k] * x[k]
    x[i] /= factor[i * size + i]
  }
  for (let i = size - 1; i >= 0; i--) {
    for (let k = i + 1; k < size; k++) x[i] -= factor[k * size + i] * x[k]
    x[i] /= factor[i * size + i]
  }
  return x
}
