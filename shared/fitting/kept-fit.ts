/** Fits that are kept: what is asked, how pages and server make them alike, and the digest that names them. */
import { z } from 'zod'
import type { ConditionData } from '../recordings/types'
import { digestOf } from '../walk/digest'
import { BOOTSTRAP_RESAMPLES, BOOTSTRAP_SEED } from './bootstrap'
import { fitBoth, type BothFits } from './fit-both'
import { WEIGHTS, type FitRefusal } from './point-errors'
import { FITTING_VERSION } from './version'

/** POST /api/recordings/:recordingId/fits → KeptFit (201): the server fits again; nothing of the result comes from the client. */
export const FitSettingsSchema = z.strictObject({
  weights: z.enum(WEIGHTS).default('pooled'),
  freePlateau: z.boolean().default(false),
  /** Of the bootstrap between one exponential and two. */
  seed: z.string().min(1).max(200).default(BOOTSTRAP_SEED),
})
export type FitSettings = z.output<typeof FitSettingsSchema>
export interface KeptFit { fitId: string, revision: number, settings: FitSettings, result: BothFits, digest: string, savedBy: string, savedAt: string }

/**
 * One and two exponentials with the bootstrap between them.
 * @param data - one condition
 * @param settings - weights, plateau, seed of the bootstrap
 * @returns both fits, or why there are none
 */
export const fitBySettings = (data: ConditionData, { weights, freePlateau, seed }: FitSettings): BothFits | FitRefusal =>
  fitBoth([data], { weights, freePlateau }, { resamples: BOOTSTRAP_RESAMPLES, seed })

/** Eight digits: beyond them machines may differ in the last rounding of exp and log. */
const rounded = (value: number) => Number(value.toPrecision(8))

/**
 * Names a fit by data, settings and what was found.
 * @param data - one condition
 * @param settings - as asked
 * @param result - both fits
 * @returns lower-case hex SHA-256
 */
export function fitDigest(data: ConditionData, settings: FitSettings, { fits, bootstrap }: BothFits): string {
  const found = fits.map(({ parameters, chi2, dof }) => ({ chi2: rounded(chi2), dof, parameters: parameters.map(({ name, value }) => ({ name, value: rounded(value) })) }))
  return digestOf({ format: 'moorage-fit', version: 1, engineVersion: FITTING_VERSION, data, settings, fits: found, p: bootstrap?.p ?? null })
}
