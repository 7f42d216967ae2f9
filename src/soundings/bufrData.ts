import { BitReader } from './bitReader.ts'
import { type BufrBlock } from './bufrBlock.ts'
import { BufrDecoder, type StepsLeft } from './bufrDecoder.ts'
import { type BufrMessage } from './bufrMessage.ts'

/** Enough steps for any honest file of so many octets, whose values take several bits each. */
export function stepsFor(octets: number): StepsLeft {
  return { steps: 1_000_000 + 2 * octets }
}

/**
 * Decodes the data of a message, subset after subset. Compressed subsets share one block, whose
 * elements then have a cell for each. Throws `BufrError`.
 */
export function* bufrSubsets(
  message: BufrMessage,
  left: StepsLeft,
): Generator<{ block: BufrBlock; subset: number }> {
  const reader = new BitReader(message.data)
  if (message.compressed) {
    const block = new BufrDecoder(reader, message.subsets, left).decode(message.descriptors)
    for (let subset = 0; subset < message.subsets; subset++) yield { block, subset }
  } else {
    for (let subset = 0; subset < message.subsets; subset++) {
      yield { block: new BufrDecoder(reader, 0, left).decode(message.descriptors), subset: 0 }
    }
  }
}
