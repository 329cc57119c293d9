// Lognormal factors with median 1 in a Latin hypercube: a sample is the same bits wherever and in whatever order it is asked for.
import { latinHypercubeShare } from '#engine/sweep/plan.ts'
import { normalQuantile } from './distributions.ts'

/** The standard normal deviate of sample i in column j. */
export const deviate = (seed: number, j: number, i: number, samples: number): number =>
  normalQuantile(latinHypercubeShare(seed, j, i, samples))

/** The factor with sigma of its logarithm. */
export const lognormal = (sigma: number, z: number): number => Math.exp(sigma * z)

/** Sigma of ln of what is within ±`share` in nine cases of ten. */
export const sigmaOfNineTenths = (share: number): number => Math.log1p(share) / 1.645

/** Sigma of ln of what is off by `share` on average. */
export const sigmaOfMeanError = (share: number): number => 1.253 * share
