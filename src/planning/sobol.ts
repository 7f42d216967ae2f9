import { directionNumbers } from './sobolNumbers.ts'

const BITS = 32

/** Most dimensions that a sequence may have. */
export const MOST_DIMENSIONS = directionNumbers.length + 1

/**
 * The Sobol sequence, Owen-scrambled by a seed: any point of it can be asked for at once. A different
 * seed gives another sequence of the same evenness, and the same seed the same one.
 */
export class ScrambledSobol {
  private readonly dimensions: number
  /** Direction numbers, 32 for each dimension. */
  private readonly directions: Int32Array
  /** A scrambling seed for each dimension. */
  private readonly seeds: Int32Array

  constructor(dimensions: number, seed: number) {
    if (dimensions > MOST_DIMENSIONS) throw new Error(`at most ${MOST_DIMENSIONS} dimensions`)
    this.dimensions = dimensions
    this.directions = new Int32Array(dimensions * BITS)
    this.seeds = new Int32Array(dimensions)
    for (let dimension = 0; dimension < dimensions; dimension++) {
      fillDirections(dimension, this.directions.subarray(dimension * BITS, (dimension + 1) * BITS))
      this.seeds[dimension] = hash(seed ^ hash(dimension + 1))
    }
  }

  /** Fills `out` with point `index`, each coordinate inside (0, 1). */
  point(index: number, out: Float64Array): void {
    for (let dimension = 0; dimension < this.dimensions; dimension++) {
      const bits = scramble(this.bits(dimension, index), this.seeds[dimension])
      out[dimension] = ((bits >>> 0) + 0.5) / 2 ** BITS
    }
  }

  /** The 32 bits behind the point of one dimension of the sequence before scrambling. */
  bits(dimension: number, index: number): number {
    let bits = 0
    for (let rest = index, at = dimension * BITS; rest !== 0; rest >>>= 1, at++) {
      if (rest & 1) bits ^= this.directions[at]
    }
    return bits
  }
}

function fillDirections(dimension: number, out: Int32Array): void {
  if (dimension === 0) {
    for (let bit = 0; bit < BITS; bit++) out[bit] = 1 << (BITS - 1 - bit) // van der Corput
    return
  }
  const [degree, coefficients, ...initial] = directionNumbers[dimension - 1]
  for (let bit = 0; bit < BITS; bit++) {
    if (bit < degree) {
      out[bit] = initial[bit] << (BITS - 1 - bit)
      continue
    }
    // Joe and Kuo 2008, eq. 2, on numbers shifted to the top
    let next = out[bit - degree] ^ (out[bit - degree] >>> degree)
    for (let k = 1; k < degree; k++) {
      if ((coefficients >>> (degree - 1 - k)) & 1) next ^= out[bit - k]
    }
    out[bit] = next
  }
}

/** Nested uniform scrambling by a hash that only lets lower bits change higher ones: Burley, JCGT 9(4), 2020. */
function scramble(bits: number, seed: number): number {
  let x = reverse(bits)
  x = (x + seed) | 0
  x ^= Math.imul(x, 0x6c50b47c)
  x ^= Math.imul(x, 0xb82f1e52)
  x ^= Math.imul(x, 0xc7afe638)
  x ^= Math.imul(x, 0x8d22f6e6)
  return reverse(x)
}

function reverse(bits: number): number {
  let x = bits
  x = ((x >>> 1) & 0x55555555) | ((x & 0x55555555) << 1)
  x = ((x >>> 2) & 0x33333333) | ((x & 0x33333333) << 2)
  x = ((x >>> 4) & 0x0f0f0f0f) | ((x & 0x0f0f0f0f) << 4)
  x = ((x >>> 8) & 0x00ff00ff) | ((x & 0x00ff00ff) << 8)
  return (x >>> 16) | (x << 16)
}

/** Spreads a seed over 32 bits: the finaliser of MurmurHash3 (Appleby, public domain). */
export function hash(seed: number): number {
  let x = seed | 0
  x = Math.imul(x ^ (x >>> 16), 0x85ebca6b)
  x = Math.imul(x ^ (x >>> 13), 0xc2b2ae35)
  return x ^ (x >>> 16)
}
