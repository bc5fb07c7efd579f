/** How far the closed form's τ moves with each of its four factors. */
import { closedForm } from '#shared/kinetics/closed-form'
import type { Scenario } from '#shared/schemas/scenario'

export interface TauMove { symbol: string, name: string, lower: number | null, higher: number | null, note: string | null }
const STEP = 0.2

/** The four factors of τ = 1/(D·ρ·a·s), each changed alone; the mean attachment probability stands for every kind of site. */
export function tauMoves(scenario: Scenario): TauMove[] {
  const base = closedForm(scenario).tauS
  const factor = (changed: Scenario) => {
    const tauS = closedForm(changed).tauS
    return base === null || tauS === null ? null : tauS / base
  }
  const medium = (key: 'diffusionUm2PerS' | 'densityPerUm3' | 'spacingNm', by: number) => factor({ ...scenario, medium: { ...scenario.medium, [key]: scenario.medium[key] * by } })
  const most = Math.max(...scenario.sites.map(site => site.attachProbability))
  const attach = (by: number) => factor({ ...scenario, sites: scenario.sites.map(site => ({ ...site, attachProbability: Math.min(1, site.attachProbability * by) })) })
  const both = (key: 'diffusionUm2PerS' | 'densityPerUm3' | 'spacingNm') => ({ lower: medium(key, 1 - STEP), higher: medium(key, 1 + STEP), note: null })
  return [
    { symbol: 'D', name: 'diffusion coefficient', ...both('diffusionUm2PerS') },
    { symbol: 'ρ', name: 'vesicle density', ...both('densityPerUm3') },
    { symbol: 'a', name: 'vesicle diameter', ...both('spacingNm') },
    { symbol: 's', name: 'attachment per hit, every kind', lower: attach(1 - STEP), higher: attach(1 + STEP), note: most * (1 + STEP) > 1 ? 'a probability ends at 1' : null },
  ]
}
