/** What each field of a scenario is called: one table for form, history, comparison and problem sentences. */
import type { Scenario } from './scenario'
import { capital } from './text'

export interface FieldName {
  /** Words for people, the kind's own name filled in. */
  label: string
  /** The letter that the trade uses, where there is one. */
  symbol?: string
  /** Unit of the stored value; '' for words and counts without one. */
  unit: string
}

const NAMES: Record<string, FieldName> = {
  'title': { label: 'Title', unit: '' },
  'notes': { label: 'Notes', unit: '' },
  'medium.diffusionUm2PerS': { label: 'Diffusion coefficient', symbol: 'D', unit: 'µm²/s' },
  'medium.densityPerUm3': { label: 'Vesicle density', symbol: 'ρ', unit: '1/µm³' },
  'medium.spacingNm': { label: 'Vesicle diameter', symbol: 'a', unit: 'nm' },
  'medium.crowding': { label: 'Crowding', unit: '' },
  'ribbon.shape': { label: 'Shape', unit: '' },
  'ribbon.rows': { label: 'Rows per face', unit: 'sites' },
  'ribbon.columns': { label: 'Columns per face', unit: 'sites' },
  'ribbon.faces': { label: 'Faces', unit: '' },
  'ribbon.classLayout': { label: 'Layout of the kinds', unit: '' },
  'ribbon.count': { label: 'Ribbons in the terminal', unit: 'ribbons' },
  'reservoir.supply': { label: 'Supply', unit: '' },
  'reservoir.marginSites': { label: 'Bath held from', unit: 'voxels' },
  'reservoir.sizeUm': { label: 'Size of the terminal', unit: 'µm' },
  'reservoir.sizeUm.0': { label: 'Length of the terminal', unit: 'µm' },
  'reservoir.sizeUm.1': { label: 'Width of the terminal', unit: 'µm' },
  'reservoir.sizeUm.2': { label: 'Height of the terminal', unit: 'µm' },
  'sites': { label: 'Kinds of site', unit: '' },
  'vesicles': { label: 'Kinds of vesicle', unit: '' },
  'schedule.durationS': { label: 'Watch for', unit: 's' },
  'schedule.sampleEveryMs': { label: 'Sample every', unit: 'ms' },
  'schedule.initialFill': { label: 'Initial fill', unit: 'of sites' },
  'schedule.releases': { label: 'Later releases', unit: '' },
  'schedule.decline': { label: 'Declining attachment', unit: '' },
  'schedule.decline.restFactor': { label: 'Decline: resting factor', unit: 'of s' },
  'schedule.decline.timeConstantS': { label: 'Decline: time constant', unit: 's' },
}
const CLASS_NAMES: Record<string, FieldName> = {
  name: { label: 'name', unit: '' },
  share: { label: 'share', unit: '' },
  attachProbability: { label: 'attachment', symbol: 's', unit: 'per hit' },
  detachPerS: { label: 'letting go', unit: '1/s' },
  readyPerS: { label: 'becoming ready', unit: '1/s' },
  attachFactor: { label: 'factor on attachment', unit: 'of s' },
  mobilityFactor: { label: 'mobility', unit: 'of D' },
}
const RELEASE_NAMES: Record<string, FieldName> = {
  atMs: { label: 'at', unit: 'ms' },
  fraction: { label: 'fraction let go', unit: 'of filled' },
}

/** Name of the field at a path (`sites.0.attachProbability` → “Quick: attachment”, s, per hit); an unknown path names itself. */
export function fieldName(path: string, scenario?: Pick<Scenario, 'sites' | 'vesicles'>): FieldName {
  const known = NAMES[path]
  if (known) return known
  const [head, index, key] = path.split('.')
  if ((head === 'sites' || head === 'vesicles') && index !== undefined) {
    const own = scenario?.[head][Number(index)]?.name
    const name = capital(own ?? `${head === 'sites' ? 'site' : 'vesicle'} kind ${Number(index) + 1}`)
    const field = key === undefined ? undefined : CLASS_NAMES[key]
    const unit = key === 'share' ? `of ${head}` : field?.unit ?? ''
    return field ? { ...field, label: `${name}: ${field.label}`, unit } : { label: name, unit: '' }
  }
  const release = head === 'schedule' && index === 'releases' ? path.split('.') : undefined
  if (release?.[2] !== undefined) {
    const field = release[3] === undefined ? undefined : RELEASE_NAMES[release[3]]
    return { label: `Release ${Number(release[2]) + 1}${field ? `: ${field.label}` : ''}`, unit: field?.unit ?? '' }
  }
  return { label: path, unit: '' }
}
