import { MOLAR_GAS_CONSTANT } from './constants.ts'
import { type GasKind } from './gas.ts'

/**
 * Compressibility Z = p·V/(n·R·T) of a pure gas at K and Pa, up to 350 bar and from 220 to 400 K: how
 * far gas under pressure takes more room than an ideal gas would.
 */
export function compressibility(kind: GasKind, temperature: number, pressure: number): number {
  return kind === 'hydrogen'
    ? hydrogenCompressibility(temperature, pressure)
    : heliumCompressibility(temperature, pressure)
}

/** Moles of a real gas in `volume` m³ at K and Pa. */
export function molesIn(
  kind: GasKind,
  volume: number,
  temperature: number,
  pressure: number,
): number {
  const z = compressibility(kind, temperature, pressure)
  return (pressure * volume) / (z * MOLAR_GAS_CONSTANT * temperature)
}

/** Coefficients a, b, c of hydrogen. Lemmon, Huber and Leachman, J. Res. NIST 113, 2008, table 1 (from memory). */
const HYDROGEN = [
  [0.0588846, 1.325, 1],
  [-0.06136111, 1.87, 1],
  [-0.002650473, 2.5, 2],
  [0.002731125, 2.8, 2],
  [0.001802374, 2.938, 2.42],
  [-0.001150707, 3.14, 2.63],
  [9.588528e-5, 3.37, 3],
  [-1.10904e-7, 3.75, 4],
  [1.264403e-10, 4, 5],
] as const

function hydrogenCompressibility(temperature: number, pressure: number): number {
  const cold = 100 / temperature
  const megapascals = pressure / 1e6
  // Z = 1 + Σ aᵢ·(100 K/T)^bᵢ·(p/1 MPa)^cᵢ: Lemmon, Huber and Leachman 2008, eq. 2
  return HYDROGEN.reduce((z, [a, b, c]) => z + a * cold ** b * megapascals ** c, 1)
}

/**
 * Reducing temperature, K, and density, mol/m³, of helium; then n, d, t, l of its power terms and n, d, t,
 * η, β, γ, ε of its Gaussian terms. Ortiz Vega, Hall, Holste, Harvey and Lemmon, NIST IR 8474, 2023;
 * coefficients looked up in an open library of fluid properties that cites it.
 */
const HELIUM = {
  temperature: 5.1953,
  density: 17_383.7,
  power: [
    [0.015559018, 4, 1, 0],
    [3.0638932, 1, 0.425, 0],
    [-4.2420844, 1, 0.63, 0],
    [0.054418088, 2, 0.69, 0],
    [-0.18971904, 2, 1.83, 0],
    [0.087856262, 3, 0.575, 0],
    [2.2833566, 1, 0.925, 1],
    [-0.53331595, 1, 1.585, 2],
    [-0.53296502, 3, 1.69, 2],
    [0.99444915, 2, 1.51, 1],
    [-0.30078896, 2, 2.9, 2],
    [-1.6432563, 1, 0.8, 1],
  ],
  gaussian: [
    [0.8029102, 2, 1.26, 1.5497, 0.2471, 3.15, 0.596],
    [0.026838669, 1, 3.51, 9.245, 0.0983, 2.54505, 0.3423],
    [0.04687678, 2, 2.785, 4.76323, 0.1556, 1.2513, 0.761],
    [-0.14832766, 1, 1, 6.3826, 2.6782, 1.9416, 0.9747],
    [0.03016211, 1, 4.22, 8.7023, 2.7077, 0.5984, 0.5868],
    [-0.019986041, 3, 0.83, 0.255, 0.6621, 2.2282, 0.5627],
    [0.14283514, 2, 1.575, 0.3523, 0.1775, 1.606, 2.5346],
    [0.007418269, 2, 3.447, 0.1492, 0.4821, 3.815, 3.6763],
    [-0.22989793, 3, 0.73, 0.05, 0.3069, 1.61958, 4.5245],
    [0.79224829, 2, 1.634, 0.1668, 0.1758, 0.6407, 5.039],
    [-0.049386338, 2, 6.13, 42.2358, 1357.6577, 1.076, 0.959],
  ],
} as const

/** Z = 1 + δ·∂αʳ/∂δ of helium at a reduced density δ and a reciprocal reduced temperature τ. */
function heliumAtDensity(delta: number, tau: number): number {
  let z = 1
  for (const [n, d, t, l] of HELIUM.power) {
    const damping = l === 0 ? 0 : delta ** l
    z += n * delta ** d * tau ** t * Math.exp(-damping) * (d - l * damping)
  }
  for (const [n, d, t, eta, beta, gamma, epsilon] of HELIUM.gaussian) {
    const bell = Math.exp(-eta * (delta - epsilon) ** 2 - beta * (tau - gamma) ** 2)
    z += n * delta ** d * tau ** t * bell * (d - 2 * eta * delta * (delta - epsilon))
  }
  return z
}

function heliumCompressibility(temperature: number, pressure: number): number {
  const tau = HELIUM.temperature / temperature
  const idealDelta = pressure / (MOLAR_GAS_CONSTANT * temperature * HELIUM.density)
  // δ = δ(ideal)/Z(δ) contracts by about Z − 1 at each round.
  let z = 1
  for (let round = 0; round < 40; round++) {
    const next = heliumAtDensity(idealDelta / z, tau)
    if (Math.abs(next - z) < 1e-12) return next
    z = next
  }
  return z
}
