/** Physical constants shared by the correlations. */

/** Standard gravity, m/s². */
export const GRAVITY = 9.80665

/** Molar gas constant, J/(mol K), exact since the 2019 SI. */
export const GAS_CONSTANT = 8.314462618

/** Celsius zero in kelvin. */
export const CELSIUS_ZERO = 273.15
