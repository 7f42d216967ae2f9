import { benchFlights } from './flightsBench.ts'
import { benchPosting } from './postingBench.ts'

/** Prints the figures that the documentation quotes; nothing here passes or fails. */
console.log(`Node ${process.version}, one run; figures of one machine, not of yours\n`)
benchFlights()
await benchPosting()
