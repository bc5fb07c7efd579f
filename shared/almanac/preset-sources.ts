/** Titles, summaries and sources of the presets: which number of which scenario comes from where. */
import type { PresetSource } from './presets'

const from = (path: string, sentence: string, source: string, status: PresetSource['status']): PresetSource => ({ path, sentence, source, status })
const D = 'medium.diffusionUm2PerS', DENSITY = 'medium.densityPerUm3', SPACING = 'medium.spacingNm', S0 = 'sites.0.attachProbability', S1 = 'sites.1.attachProbability'
const CONE_D = from(D, 'About 0.11 µm²/s in lizard cone terminals; another cell here unless it is a cone.', 'H-31, Rea et al. 2004 Neuron 41:755', 'unverified')
const SMALL_EYE_DENSITY = from(DENSITY, '1000 /µm³, within several hundred to about 2000 /µm³ for cones and rods.', 'H-14, no source traced', 'unverified')
const SHARES = from('sites', 'Half and half: no source gives the shares.', 'our choice', 'chosen')
const NO_DEPTH = from('schedule.initialFill', 'The stimulus empties every site: no source gives the depletion of this protocol.', 'our choice', 'chosen')
const MARGIN = from('reservoir.marginSites', 'Resting density is kept 12 spacings from the ribbon.', 'our choice', 'chosen')

export const PRESET_TEXTS: readonly { id: string, title: string, summary: string, sources: PresetSource[] }[] = [
  {
    id: 'cone', title: 'Amphibian cone', summary: 'A cone ribbon of 110 sites with two kinds of site, 0.8 s and 13 s at stirred supply.',
    sources: [
      from(SPACING, '45 nm is often used for salamander cones.', 'H-04, no source traced', 'unverified'), CONE_D, SMALL_EYE_DENSITY,
      from('ribbon.rows', '5 × 11 on two faces: about 20 releasable and about 90 reserve vesicles on a ribbon.', 'H-09, Bartoletti et al. 2010 J Neurophysiol 103:419', 'looked up'),
      from('ribbon.count', 'About 13 ribbons a cell.', 'H-09, Bartoletti et al. 2010 J Neurophysiol 103:419', 'looked up'),
      from(S0, 'From the fast phase of about 0.8 s by s = 1/(D·ρ·a·τ).', 'H-50, common practice, no source', 'computed'),
      from(S1, 'From the slow phase of about 13 s by s = 1/(D·ρ·a·τ).', 'H-50, common practice, no source', 'computed'), SHARES, NO_DEPTH, MARGIN,
    ],
  },
  {
    id: 'rod', title: 'Mouse rod', summary: 'One long ribbon with 87 releasable vesicles on its base.',
    sources: [
      from(SPACING, '45 nm, within 30 to 50 nm for photoreceptors.', 'H-04, no source traced', 'unverified'), CONE_D, SMALL_EYE_DENSITY,
      from('ribbon.rows', '3 × 29: a releasable pool of 87 vesicles.', 'H-17, Grabner & Moser 2021 eLife 10:e63844', 'looked up'),
      from('ribbon.count', 'One ribbon a terminal.', 'H-08, Rao-Mirotznik et al. 1995 Neuron 14:561', 'unverified'),
      from(S0, 'From 0.8 s by s = 1/(D·ρ·a·τ): rods recover at rates similar to cones, in salamander.', 'H-53, Rabl et al. 2006 J Neurosci 26:2555; H-50, common practice, no source', 'computed'), NO_DEPTH, MARGIN,
    ],
  },
  {
    id: 'rod-bipolar', title: 'Rodent rod bipolar cell', summary: 'Small active zones of 7 vesicles, half of the store immobile, 4 s at stirred supply.',
    sources: [
      from(SPACING, '40 nm, within 30 to 50 nm for bipolar cells.', 'H-04, no source traced', 'unverified'),
      from(D, '0.015 µm²/s in goldfish bipolar terminals; another animal here.', 'H-30, Holt et al. 2004 Curr Biol 14:173', 'looked up'),
      from(DENSITY, '1000 /µm³: no value for this cell; the range is that of cones and rods.', 'H-14, no source traced', 'unverified'),
      from('ribbon.columns', 'A releasable pool of 7 vesicles an active zone.', 'H-20, Singer & Diamond 2006 J Neurophysiol', 'looked up'),
      from('ribbon.count', '37, within 30 to 45 ribbons a cell.', 'H-16, no source traced', 'unverified'),
      from('vesicles.1.share', 'About half of the vesicles do not move, away from ribbons at rest.', 'H-32, LoGiudice et al. 2008 J Neurosci 28:3150', 'looked up'),
      from(S0, 'From about 4 s by s = 1/(D·ρ·a·τ) with the mobile half.', 'H-57, Singer & Diamond 2006', 'computed'), NO_DEPTH, MARGIN,
    ],
  },
  {
    id: 'goldfish-bipolar', title: 'Goldfish Mb1 bipolar cell', summary: 'The 22 sites at the base of a ribbon, slow vesicles, 8 s at stirred supply.',
    sources: [
      from(SPACING, '30 nm, the lower end of 30 to 50 nm.', 'H-04, no source traced', 'unverified'),
      from(D, 'About 0.015 µm²/s, unchanged by Ca²⁺ influx.', 'H-30, Holt et al. 2004 Curr Biol 14:173', 'looked up'),
      from(DENSITY, '450 /µm³: 300 000 vesicles in a sphere 10 to 12 µm across are 330 to 570 /µm³.', 'H-13, computed from H-12', 'computed'),
      from('ribbon.rows', '2 × 11: about 22 vesicles at the base of a ribbon.', 'H-11, von Gersdorff et al. 1996 Neuron 16:1221', 'unverified'),
      from('ribbon.count', '55, within 45 to 65 active zones a terminal.', 'H-10, review text citing von Gersdorff & Matthews 1999', 'looked up'),
      from(S0, 'From about 8 s after one 250 ms pulse by s = 1/(D·ρ·a·τ).', 'H-54, von Gersdorff & Matthews 1997 J Neurosci 17:1919', 'computed'), NO_DEPTH, MARGIN,
    ],
  },
  {
    id: 'inner-hair-cell', title: 'Mouse inner hair cell', summary: 'About 30 vesicles an active zone, 0.14 s and 3 s at stirred supply.',
    sources: [
      from(SPACING, '37.5 nm, the middle of 35 to 40 nm.', 'H-02, review figure', 'looked up'), CONE_D,
      from(DENSITY, '2000 /µm³, the upper end of the range for cones and rods; no value for this cell.', 'H-14, no source traced', 'unverified'),
      from('ribbon.rows', '3 × 5 on two faces: about 30 vesicles an active zone.', 'H-06, review figure', 'looked up'),
      from('ribbon.count', '14, within 10 to 20 ribbons a cell.', 'H-16, no source traced', 'unverified'),
      from(S0, 'From about 0.14 s by s = 1/(D·ρ·a·τ).', 'H-59, Moser & Beutner 2000 PNAS 97:883', 'unverified'),
      from(S1, 'From about 3 s by s = 1/(D·ρ·a·τ).', 'H-59, Moser & Beutner 2000 PNAS 97:883', 'unverified'), SHARES, NO_DEPTH, MARGIN,
    ],
  },
  {
    id: 'saccular-hair-cell', title: 'Frog saccular hair cell', summary: 'About 32 docked vesicles, 29 ms: only a store that is enriched near the ribbon can feed it.',
    sources: [
      from(SPACING, '34.3 nm, CV 8.8 %.', 'H-01, Lenzi et al. 1999 J Neurosci 19:119', 'looked up'), CONE_D,
      from(DENSITY, '10 000 /µm³: five times the upper end for cones and rods; 3- to 14-fold enrichment near the synapse is published.', 'H-15, Lenzi et al. 1999; H-14, no source traced', 'unverified'),
      from('ribbon.rows', '4 × 8: about 32 docked vesicles.', 'H-05, Lenzi et al. 1999', 'looked up'),
      from('ribbon.count', 'About 20 ribbons a cell.', 'H-16, no source traced', 'unverified'),
      from(S0, 'From 29 ms by s = 1/(D·ρ·a·τ).', 'H-61, Edmonds et al. 2004 J Physiol', 'computed'), NO_DEPTH, MARGIN,
    ],
  },
  {
    id: 'papilla-hair-cell', title: 'Bullfrog papilla hair cell', summary: 'About 39 ms overall with 2 mM EGTA; the site count is our choice.',
    sources: [
      from(SPACING, '40 nm: no value for this cell.', 'our choice', 'chosen'), CONE_D,
      from(DENSITY, '6000 /µm³: three times the upper end for cones and rods; 3- to 14-fold enrichment is published for the frog saccule.', 'H-15, Lenzi et al. 1999; H-14, no source traced', 'unverified'),
      from('ribbon.rows', '4 × 8 as in the frog saccule: no value for this cell.', 'our choice', 'chosen'),
      from('ribbon.count', '20 as in the frog saccule: no value for this cell.', 'our choice', 'chosen'),
      from(S0, 'From 39.2 ms by s = 1/(D·ρ·a·τ).', 'H-63, J Neurosci 2011 31:5682 fig. 5', 'computed'), NO_DEPTH, MARGIN,
    ],
  },
]
