/** One package of a flight train. */
export interface Package {
  name: string
  /** kg */
  mass: number
  /** Area of its smallest face, m²; null where nobody measured it */
  smallestFace: number | null
}

export type IcaoClass = 'light' | 'medium' | 'heavy'

/** The class of an unmanned free balloon, and what decides it. */
export interface IcaoClassification {
  class: IcaoClass
  /** The limits that decide, in plain words with the numbers */
  reasons: string[]
  /** What is not known and could make the class heavier, in plain words */
  missing: string[]
}

/** Limits of ICAO Annex 2, appendix on unmanned free balloons; Regulation (EU) 923/2012, appendix 2. */
const LIMITS = {
  /** Payload in all, kg */
  medium: 4,
  heavy: 6,
  /** One package, kg */
  heavyPackage: 3,
  densePackage: 2,
  /** Mass over the smallest face of a dense package, kg/m² (13 g/cm²) */
  density: 130,
  /** Force at which the suspension parts, N */
  suspension: 230,
} as const

/**
 * The class of a flight train of packages.
 * `payloadMass` is everything carried, kg; `suspensionStrength` the force at which the line parts, N, or
 * null where nobody knows. The competent authority decides; this says what the numbers say.
 */
export function classify(
  payloadMass: number,
  packages: readonly Package[],
  suspensionStrength: number | null,
): IcaoClassification {
  const heavy: string[] = []
  const missing: string[] = []
  if (payloadMass >= LIMITS.heavy) {
    heavy.push(`the payload of ${kilograms(payloadMass)} is ${kilograms(LIMITS.heavy)} or more`)
  }
  for (const { name, mass, smallestFace } of packages) {
    if (mass >= LIMITS.heavyPackage) {
      heavy.push(
        `${name} of ${kilograms(mass)} is a package of ${kilograms(LIMITS.heavyPackage)} or more`,
      )
    } else if (mass >= LIMITS.densePackage) {
      if (smallestFace === null) missing.push(`the smallest face of ${name}`)
      else if (mass / smallestFace > LIMITS.density) {
        const density = `${(mass / smallestFace / 10).toFixed(1)} g/cm²`
        heavy.push(
          `${name} of ${kilograms(mass)} has ${density} over its smallest face, over 13 g/cm²`,
        )
      }
    }
  }
  if (packages.length === 0 && payloadMass >= LIMITS.densePackage) {
    missing.push('the masses of the single packages')
  }
  if (suspensionStrength === null) missing.push('the force at which the line parts')
  else if (suspensionStrength >= LIMITS.suspension) {
    heavy.push(`the line parts at ${suspensionStrength} N, ${LIMITS.suspension} N or more`)
  }

  if (heavy.length > 0) return { class: 'heavy', reasons: heavy, missing: [] }
  const total = `the payload of ${kilograms(payloadMass)} is`
  if (payloadMass >= LIMITS.medium) {
    return { class: 'medium', reasons: [`${total} 4 kg or more and under 6 kg`], missing }
  }
  return { class: 'light', reasons: [`${total} under 4 kg`], missing }
}

function kilograms(mass: number): string {
  return `${Number(mass.toFixed(3))} kg`
}
