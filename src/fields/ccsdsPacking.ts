import { unpack } from './bits.ts'
import { damaged } from './gribError.ts'

/** Template 5.42: how the adaptive entropy coder was set. */
export interface EntropyCoding {
  bitsPerSample: number
  /** Samples in a block */
  blockSize: number
  /** Blocks from one reference sample to the next */
  referenceInterval: number
  /** Samples are signed two's complement */
  signed: boolean
  /** Samples were predicted by their predecessor before coding */
  preprocessed: boolean
  /** The short table of code options is used for samples of up to four bits */
  restricted: boolean
  /** Each reference interval begins on a whole octet */
  padded: boolean
}

/** The flags of octet 22 of template 5.42, as the coding library in general use numbers them. */
export function readEntropyFlags(flags: number) {
  return {
    signed: (flags & 1) !== 0,
    preprocessed: (flags & 8) !== 0,
    restricted: (flags & 16) !== 0,
    padded: (flags & 32) !== 0,
  }
}

/** A run of zero blocks that reaches to the end of its segment, and the segment's blocks. */
const REST_OF_SEGMENT = 5
const SEGMENT_BLOCKS = 64

/**
 * Decodes lossless data compression, CCSDS 121.0-B-3 (sections 3 and 4), into `count` samples.
 * @throws GribError where the bytes end first or code an impossible sample.
 */
export function decodeEntropy(
  bytes: Uint8Array,
  coding: EntropyCoding,
  count: number,
): Float64Array {
  const { bitsPerSample, blockSize, referenceInterval } = coding
  if (!(bitsPerSample >= 1 && bitsPerSample <= 32))
    throw damaged(`samples of ${bitsPerSample} bits`)
  if (blockSize < 2 || blockSize > 256 || blockSize % 2 !== 0) {
    throw damaged(`blocks of ${blockSize} samples`)
  }
  if (referenceInterval < 1) throw damaged('no reference samples')
  const interval = blockSize * referenceInterval
  const wholeBlocks = Math.ceil(count / blockSize) * blockSize
  const coded = new Float64Array(Math.min(interval, wholeBlocks))
  const samples = new Float64Array(count)
  const reader = new BlockReader(bytes, coding, coded)
  for (let at = 0; at < count; at += interval) {
    reader.readInterval(Math.min(interval, wholeBlocks - at))
    const wanted = Math.min(interval, count - at)
    if (coding.preprocessed) unpredict(coded, wanted, coding)
    else if (coding.signed) signExtend(coded, wanted, bitsPerSample)
    samples.set(coded.subarray(0, wanted), at)
  }
  return samples
}

/** Zero bytes put after the coded ones, so that a window of bits may reach past their end. */
const PADDING = 8

/** Reads coded blocks. */
class BlockReader {
  private readonly bytes: Uint8Array
  private readonly end: number
  private readonly coding: EntropyCoding
  private readonly out: Float64Array
  private readonly optionBits: number
  private readonly lowParts: Float64Array
  private bit = 0

  constructor(bytes: Uint8Array, coding: EntropyCoding, out: Float64Array) {
    this.bytes = new Uint8Array(bytes.length + PADDING)
    this.bytes.set(bytes)
    this.end = bytes.length * 8
    this.coding = coding
    this.out = out
    this.lowParts = new Float64Array(coding.blockSize)
    const { bitsPerSample, restricted } = coding
    // Table 5-1 and 5-2: bits of the option identifier.
    if (restricted && bitsPerSample <= 2) this.optionBits = 1
    else if (restricted && bitsPerSample <= 4) this.optionBits = 2
    else this.optionBits = bitsPerSample <= 8 ? 3 : bitsPerSample <= 16 ? 4 : 5
  }

  /** Fills `out` with the coded samples of a reference interval, `length` of them. */
  readInterval(length: number): void {
    if (this.coding.padded) this.bit = Math.ceil(this.bit / 8) * 8
    const { blockSize } = this.coding
    let at = 0
    while (at < length) {
      const first = at === 0 && this.coding.preprocessed ? 1 : 0
      const option = this.bits(this.optionBits)
      if (option === 0) {
        if (this.bits(1) === 0) {
          at = this.zeroBlocks(at, first, length)
          continue
        }
        if (first) this.out[at] = this.bits(this.coding.bitsPerSample)
        this.secondExtension(at, first)
      } else if (option === 2 ** this.optionBits - 1) {
        for (let index = at; index < at + blockSize; index++) {
          this.out[index] = this.bits(this.coding.bitsPerSample)
        }
      } else {
        if (first) this.out[at] = this.bits(this.coding.bitsPerSample)
        this.split(at + first, at + blockSize, option - 1)
      }
      at += blockSize
    }
  }

  /** A run of blocks of zeros. Returns where it ends. */
  private zeroBlocks(at: number, first: number, length: number): number {
    const { blockSize, bitsPerSample } = this.coding
    if (first) this.out[at] = this.bits(bitsPerSample)
    let blocks = this.unary() + 1
    const block = at / blockSize
    const left = length / blockSize - block
    if (blocks === REST_OF_SEGMENT) {
      blocks = Math.min(
        this.coding.referenceInterval - block,
        SEGMENT_BLOCKS - (block % SEGMENT_BLOCKS),
      )
    } else if (blocks > REST_OF_SEGMENT) blocks--
    if (blocks > this.coding.referenceInterval - block)
      throw damaged('a run of zeros past its interval')
    const end = at + Math.min(blocks, left) * blockSize
    this.out.fill(0, at + first, end)
    return end
  }

  /** Pairs of samples coded as one: m = (a+b)(a+b+1)/2 + b. */
  private secondExtension(at: number, first: number): void {
    const end = at + this.coding.blockSize
    for (let index = at; index < end; index += 2) {
      const pair = this.unary()
      const sum = Math.floor((Math.sqrt(8 * pair + 1) - 1) / 2)
      const second = pair - (sum * (sum + 1)) / 2
      if (index > at || first === 0) this.out[index] = sum - second
      this.out[index + 1] = second
    }
  }

  /** Sample splitting: the high parts in unary, then the low parts of `low` bits. */
  private split(from: number, to: number, low: number): void {
    const { out, bytes, lowParts } = this
    const scale = 2 ** low
    let { bit } = this
    let window = windowAt(bytes, bit)
    let left = 32 // bits of the window not used yet
    let zeros = 0
    for (let index = from; index < to;) {
      const leading = Math.clz32(window)
      if (leading < left) {
        out[index++] = (zeros + leading) * scale
        zeros = 0
        window = (window << leading) << 1
        left -= leading + 1
        bit += leading + 1
      } else {
        zeros += left
        bit += left
        if (bit > this.end) throw endsEarly()
        window = windowAt(bytes, bit)
        left = 32
      }
    }
    if (low > 0) {
      bit = unpack(bytes, bit, low, to - from, lowParts, 0)
      for (let index = from; index < to; index++) out[index] += lowParts[index - from]
    }
    this.bit = bit
    this.skip(0)
  }

  /** The number of zeros before the next one. */
  private unary(): number {
    let zeros = 0
    let window = windowAt(this.bytes, this.bit)
    while (window === 0) {
      zeros += 32
      this.skip(32)
      window = windowAt(this.bytes, this.bit)
    }
    const leading = Math.clz32(window)
    this.skip(leading + 1)
    return zeros + leading
  }

  /** The next `width` bits, 1 to 32, as a number. */
  private bits(width: number): number {
    const value = windowAt(this.bytes, this.bit) >>> (32 - width)
    this.skip(width)
    return value
  }

  private skip(bits: number): void {
    this.bit += bits
    if (this.bit > this.end) throw endsEarly()
  }
}

function endsEarly() {
  return damaged('entropy-coded samples that end too early')
}

/** The 32 bits from a bit on. */
function windowAt(bytes: Uint8Array, bit: number): number {
  const byte = bit >>> 3
  const skip = bit & 7
  const window =
    (bytes[byte] << 24) | (bytes[byte + 1] << 16) | (bytes[byte + 2] << 8) | bytes[byte + 3]
  return (window << skip) | (bytes[byte + 4] >>> (8 - skip))
}

/** Undoes the unit-delay predictor and its mapping to whole numbers, CCSDS 121.0-B-3, section 4. */
function unpredict(coded: Float64Array, length: number, coding: EntropyCoding): void {
  const { bitsPerSample } = coding
  const lowest = coding.signed ? -(2 ** (bitsPerSample - 1)) : 0
  const highest = lowest + 2 ** bitsPerSample - 1
  if (coding.signed) signExtend(coded, 1, bitsPerSample)
  let sample = coded[0]
  for (let index = 1; index < length; index++) {
    const mapped = coded[index]
    const below = sample - lowest
    const above = highest - sample
    const reach = Math.min(below, above)
    if (mapped > highest - lowest) throw damaged('an entropy-coded sample out of its range')
    if (mapped <= 2 * reach) sample += (mapped & 1) === 0 ? mapped / 2 : -(mapped + 1) / 2
    else sample = below < above ? lowest + mapped : highest - mapped
    coded[index] = sample
  }
}

function signExtend(samples: Float64Array, length: number, bits: number): void {
  for (let index = 0; index < length; index++) {
    if (samples[index] >= 2 ** (bits - 1)) samples[index] -= 2 ** bits
  }
}
