import { type BitReader } from './bitReader.ts'
import { BufrError } from './bufrError.ts'
import { type BufrBlock, type Cell } from './bufrBlock.ts'
import { element, sequence, spelled, type ElementEntry } from './bufrTables.ts'

/** More cells than any sounding takes, to bound memory: a level has about a dozen. */
const MOST_CELLS = 2_000_000

/** How many steps are left for all messages of a file: descriptors can loop without reading a bit. */
export interface StepsLeft {
  steps: number
}

/** How far replications and sequences stand inside each other in any table. */
const DEEPEST = 20

/** Class 31 holds replication factors and the like, which no operator changes and no bits mark missing. */
const isFactor = (descriptor: number): boolean => Math.floor(descriptor / 1000) === 31

/** Classes that remain where operator 2 21 leaves out data: coordinates and identification. */
const isCoordinate = (descriptor: number): boolean =>
  (descriptor >= 1000 && descriptor < 10_000) || isFactor(descriptor)

/** Walks through the descriptors of a message, keeping what operators (table C) have set. */
export class BufrDecoder {
  private readonly reader: BitReader
  /** Number of compressed subsets, 0 where the data are not compressed */
  private readonly compressed: number
  private block: BufrBlock = { elements: [], blocks: [] }
  private readonly left: StepsLeft
  private cells = 0
  private depth = 0

  private extraWidth = 0 // 2 01
  private extraScale = 0 // 2 02
  private referenceWidth = 0 // 2 03
  private readonly references = new Map<number, number>()
  private readonly associated: number[] = [] // 2 04
  private localWidth: number | null = null // 2 06
  private precision = 0 // 2 07
  private characters: number | null = null // 2 08
  private absent = 0 // 2 21

  constructor(reader: BitReader, compressed: number, left: StepsLeft) {
    this.reader = reader
    this.compressed = compressed
    this.left = left
  }

  decode(descriptors: readonly number[]): BufrBlock {
    const root = this.block
    this.walk(descriptors)
    return root
  }

  private walk(descriptors: readonly number[]): void {
    if (++this.depth > DEEPEST) throw new BufrError('sequences stand too deep inside each other')
    for (let i = 0; i < descriptors.length; i++) {
      this.spend(1)
      const descriptor = descriptors[i]
      const kind = Math.floor(descriptor / 100_000)
      if (kind === 0) this.readElement(descriptor)
      else if (kind === 1) i += this.replicate(descriptor, descriptors, i + 1)
      else if (kind === 2) this.operate(Math.floor(descriptor / 1000), descriptor % 1000)
      else this.walk(sequence(descriptor))
    }
    this.depth--
  }

  /** Reads what a replication descriptor repeats, and returns how many descriptors that took. */
  private replicate(replication: number, descriptors: readonly number[], start: number): number {
    const count = Math.floor(replication / 1000) % 100
    let times = replication % 1000
    let first = start
    if (times === 0) {
      const factor = descriptors[first++]
      if (!isFactor(factor)) throw new BufrError('replication without a factor')
      times = this.readFactor(factor)
      // 0 31 011 and 0 31 012 repeat the data too, which stand once: a level twice says no more.
      if (factor === 31_011 || factor === 31_012) times = Math.min(times, 1)
    }
    const body = descriptors.slice(first, first + count)
    if (body.length < count) throw new BufrError('replication of more descriptors than there are')
    const outer = this.block
    for (let time = 0; time < times; time++) {
      this.spend(1)
      this.block = { elements: [], blocks: [] }
      this.walk(body)
      outer.blocks.push(this.block)
    }
    this.block = outer
    return first - start + count
  }

  private readFactor(descriptor: number): number {
    const cells = this.readNumbers(element(descriptor), 0, 0, 0, false)
    this.block.elements.push({ descriptor, cells })
    const factor = cells[0]
    if (typeof factor !== 'number' || cells.some((cell) => cell !== factor)) {
      throw new BufrError('compressed subsets with different numbers of levels')
    }
    return factor
  }

  /** Table C. */
  private operate(operator: number, operand: number): void {
    switch (operator) {
      case 201:
        this.extraWidth = operand === 0 ? 0 : operand - 128
        break
      case 202:
        this.extraScale = operand === 0 ? 0 : operand - 128
        break
      case 203:
        if (operand === 0) this.references.clear()
        this.referenceWidth = operand === 255 ? 0 : operand
        break
      case 204:
        if (operand === 0) this.associated.pop()
        else this.associated.push(operand)
        break
      case 205:
        this.block.elements.push({ descriptor: 205_000 + operand, cells: this.readTexts(operand) })
        break
      case 206:
        this.localWidth = operand
        break
      case 207:
        this.precision = operand
        break
      case 208:
        this.characters = operand === 0 ? null : operand
        break
      case 221:
        this.absent = operand
        break
      case 222: // quality information follows as elements of its own
      case 235:
      case 236:
      case 237:
        break
      default:
        throw new BufrError(`operator ${spelled(operator * 1000 + operand)} cannot be read`)
    }
  }

  private readElement(descriptor: number): void {
    if (this.localWidth !== null) {
      this.readNumbers(
        { kind: 'code', scale: 0, reference: 0, width: 0 },
        this.localWidth,
        0,
        0,
        false,
      )
      this.localWidth = null
      return
    }
    const entry = element(descriptor)
    if (this.referenceWidth > 0) {
      this.references.set(descriptor, this.readReference(this.referenceWidth))
      return
    }
    if (this.absent > 0) {
      this.absent--
      if (!isCoordinate(descriptor)) return
    }
    if (!isFactor(descriptor)) {
      const width = this.associated.reduce((sum, bits) => sum + bits, 0)
      if (width > 0)
        this.readNumbers({ kind: 'code', scale: 0, reference: 0, width: 0 }, width, 0, 0, false)
    }
    const cells =
      entry.kind === 'characters'
        ? this.readTexts(this.characters ?? entry.width / 8)
        : this.readValues(descriptor, entry)
    this.block.elements.push({ descriptor, cells })
  }

  private readValues(descriptor: number, entry: ElementEntry): Cell[] {
    if (entry.kind === 'code' || isFactor(descriptor)) {
      return this.readNumbers(entry, 0, 0, 0, !isFactor(descriptor))
    }
    const increase = this.precision // 2 07 Y: scale + Y, reference · 10^Y, width + (10·Y + 2) ÷ 3
    const width = this.extraWidth + (increase > 0 ? Math.floor((10 * increase + 2) / 3) : 0)
    const reference = (this.references.get(descriptor) ?? entry.reference) * 10 ** increase
    return this.readNumbers(
      entry,
      width,
      this.extraScale + increase,
      reference - entry.reference,
      true,
    )
  }

  /** Numbers in the unit of table B; all bits set mark a missing one where they can. */
  private readNumbers(
    entry: ElementEntry,
    extraWidth: number,
    extraScale: number,
    extraReference: number,
    mayMiss: boolean,
  ): Cell[] {
    const width = entry.width + extraWidth
    if (width < 0) throw new BufrError('a number of less than no bits')
    const scale = entry.scale + extraScale
    const reference = entry.reference + extraReference
    const base = this.reader.read(width)
    const missing = mayMiss && width > 0 && base === 2 ** width - 1
    if (this.compressed === 0) {
      this.spend(1)
      return [missing ? null : scaled(base + reference, scale)]
    }
    const bits = this.reader.read(6)
    if (bits === 0) {
      this.spend(1)
      return [missing ? null : scaled(base + reference, scale)]
    }
    this.spend(this.compressed)
    return Array.from({ length: this.compressed }, () => {
      const increment = this.reader.read(bits)
      return increment === 2 ** bits - 1 ? null : scaled(base + increment + reference, scale)
    })
  }

  private readTexts(octets: number): Cell[] {
    this.spend(1)
    const base = this.reader.readText(octets)
    if (this.compressed === 0) return [base]
    const each = this.reader.read(6)
    if (each === 0) return [base]
    this.spend(this.compressed)
    return Array.from({ length: this.compressed }, () => this.reader.readText(each))
  }

  /** A new reference value of operator 2 03: a sign, then the magnitude. */
  private readReference(width: number): number {
    if (this.compressed > 0) throw new BufrError('operator 2 03 in compressed data cannot be read')
    const negative = this.reader.read(1) === 1
    const magnitude = this.reader.read(width - 1)
    return negative ? -magnitude : magnitude
  }

  private spend(cells: number): void {
    this.cells += cells
    this.left.steps -= cells
    if (this.cells > MOST_CELLS) throw new BufrError(`more than ${MOST_CELLS} values`)
    if (this.left.steps < 0) throw new BufrError('more values described than the file can hold')
  }
}

/** A number to the power of ten that its scale tells, rounded once. */
function scaled(value: number, scale: number): number {
  return scale > 0 ? value / 10 ** scale : value * 10 ** -scale
}
