/** Standard gravity, m/s². US Standard Atmosphere 1976, table 2. */
export const STANDARD_GRAVITY = 9.80665

/** Molar gas constant, J/(mol·K). SI Brochure, 9th edition, from exact constants. */
export const MOLAR_GAS_CONSTANT = 8.314462618

/** Specific gas constant of dry air, J/(kg·K). US Standard Atmosphere 1976, from its R and M0. */
export const DRY_AIR_GAS_CONSTANT = 287.05287

/** Molar mass of dry air, kg/mol. US Standard Atmosphere 1976, table 3. */
export const AIR_MOLAR_MASS = 28.9644e-3

/** Density of the standard atmosphere at sea level, kg/m³. US Standard Atmosphere 1976, table I. */
export const SEA_LEVEL_DENSITY = 1.225

/** A balloon that has not burst at this altitude, m, is refused: the model's air is not good above. */
export const CEILING = 50_000
