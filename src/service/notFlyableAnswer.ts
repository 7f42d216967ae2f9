import { type NotFlyableReason } from '../physics/notFlyable.ts'
import { type Fault } from './problems.ts'

/** Says why a plan cannot fly in the units of the API: the number, and the number that would work. */
export function describeNotFlyable(reason: NotFlyableReason): Fault {
  switch (reason.kind) {
    case 'no-free-lift':
      return {
        path: '/neckLiftG',
        message: `The neck lift of ${grams(reason.neckLift)} must exceed the payload’s ${grams(reason.payloadMass)}: the balloon would not rise. Some 1.3 to 2 times the payload is usual.`,
      }
    case 'full-at-fill':
      return {
        path: '/balloon/ratedBurstDiameterM',
        message: `The rated burst diameter of ${metres(reason.ratedBurstDiameter)} must exceed the diameter at release, ${metres(reason.fillDiameter)}: take a larger balloon or less neck lift.`,
      }
    case 'no-burst':
      return {
        path: '/balloon/ratedBurstDiameterM',
        message: `The balloon does not burst below ${reason.ceiling} m: there it measures ${metres(reason.ceilingDiameter)} of its rated ${metres(reason.ratedBurstDiameter)}. A rated burst diameter below ${metres(reason.ceilingDiameter)}, or more neck lift, would burst it.`,
      }
    case 'stops-rising': {
      const { neckLift, neededNeckLift, altitude } = reason
      const remedy =
        neededNeckLift === null
          ? 'no neck lift carries it higher with this gas: raise its purity or its temperature offset'
          : `a neck lift of at least ${Math.ceil(neededNeckLift * 1000 + 1)} g keeps it rising`
      return {
        path: '/neckLiftG',
        message: `With a neck lift of ${grams(neckLift)} the balloon stops rising at ${Math.round(altitude)} m and floats: ${remedy}.`,
      }
    }
    case 'falls-past-landing':
      return {
        path: '/landingAltitudeM',
        message: `The balloon bursts at ${Math.floor(reason.burstAltitude)} m, not above the landing altitude of ${reason.landingAltitude} m: a landing altitude below ${Math.floor(reason.burstAltitude)} m can be reached.`,
      }
  }
}

function grams(mass: number): string {
  return `${Number((mass * 1000).toFixed(1))} g`
}

function metres(length: number): string {
  return `${length.toFixed(2)} m`
}
