/** Mobility of vesicles, as published. Values come with their source; `unverified` means that the printed value was not seen in the source itself. */
import type { PublishedRange } from './range'

export const MOBILITY: readonly PublishedRange[] = [
  { id: 'H-30', quantity: 'D, most vesicles', cell: 'goldfish bipolar terminal', value: 'about 0.015 µm²/s; unchanged by Ca²⁺ influx or actin disruption', low: 0.015, high: 0.015, unit: 'µm²/s', source: 'Holt et al. 2004 (H-12)', status: 'looked up' },
  { id: 'H-31', quantity: 'D', cell: 'cone terminal (lizard)', value: 'about 0.11 µm²/s', low: 0.11, high: 0.11, unit: 'µm²/s', source: 'Rea et al. 2004 Neuron 41:755, 10.1016/s0896-6273(04)00088-1', status: 'unverified', note: 'looked up: motion is diffusive, immobile fraction below 15 %' },
  { id: 'H-32', quantity: 'mobile fraction by bleaching recovery', cell: 'mouse bipolar', value: 'about 50 % away from ribbons, about 20 % at ribbons, at rest', low: 20, high: 50, unit: '%', source: 'LoGiudice, Sterling, Matthews 2008 J Neurosci 28:3150, 10.1523/JNEUROSCI.5753-07.2008', status: 'looked up' },
  { id: 'H-33', quantity: 'mobile fraction', cell: 'cerebellar mossy fibre (no ribbon)', value: '75 %; collisions and hydrodynamics set D', low: 75, high: 75, unit: '%', source: 'Rothman et al. 2016 eLife 5:e15133, 10.7554/eLife.15133', status: 'looked up' },
  { id: 'H-34', quantity: 'D, caged', cell: 'hippocampal bouton (no ribbon)', value: 'about 5×10⁻⁵ µm²/s, cage about 50 nm', low: 5e-05, high: 5e-05, unit: 'µm²/s', source: 'Jordan, Lemke, Klingauf 2005 Biophys J 89:2091', status: 'looked up' },
  { id: 'H-35', quantity: 'mobility after phosphatase block', cell: 'hippocampal bouton', value: 'about 30-fold faster', source: 'Shtrahman et al. 2005 Biophys J 89:3615', status: 'looked up' },
  { id: 'H-36', quantity: 'upper bound, free sphere in water', cell: 'any', value: 'δ = 45 nm: 10.067 µm²/s (22 °C), 10.905 (25 °C), 14.605 (37 °C); δ = 30 nm, 25 °C: 16.358', low: 10.067, high: 16.358, unit: 'µm²/s', source: 'Stokes–Einstein, kT/(3πηδ)', status: 'computed', note: 'viscosities of water: unverified' },
  { id: 'H-37', quantity: 'published collision estimate', cell: 'goldfish bipolar', value: 'about 900 collisions/s on all ribbons; 28 000/s on the membrane', low: 900, high: 900, unit: '1/s', source: 'Holt et al. 2004 (H-12)', status: 'looked up' },
  { id: 'H-38', quantity: 'collisions from Dρδ × sites', cell: 'goldfish bipolar', value: '902.7 or 1559.9 collisions/s for D = 0.015 µm²/s, δ = 30 nm, 55 × 110 sites and a sphere 12 or 10 µm across: the order of H-37', low: 902.7, high: 1559.9, unit: '1/s', source: 'computed from H-10, H-11, H-12, H-30', status: 'computed', note: 'inputs partly unverified' },
]
