/** What manipulations do, as published. Values come with their source; `unverified` means that the printed value was not seen in the source itself. */
import type { PublishedRange } from './range'

export const MANIPULATIONS: readonly PublishedRange[] = [
  { id: 'H-70', quantity: 'inhibiting the calcium-dependent speed-up, cone', cell: '', value: 'fast refill phase smaller; attachment reduced rather than D', source: 'common practice, no source', status: 'common practice' },
  { id: 'H-71', quantity: 'more Ca²⁺ influx, caged Ca²⁺', cell: '', value: 'refill faster', source: 'Babai, Bartoletti, Thoreson 2010 J Neurosci 30:15866, 10.1523/JNEUROSCI.2891-10.2010', status: 'looked up' },
  { id: 'H-72', quantity: '0.5 → 5 mM EGTA; 1 mM BAPTA', cell: '', value: 'refill slowed, first burst spared by EGTA; release sites < 200 nm and refill sites > 200 nm from channels', source: 'Babai, Bartoletti, Thoreson 2010 J Neurosci 30:15866, 10.1523/JNEUROSCI.2891-10.2010', status: 'looked up' },
  { id: 'H-73', quantity: 'ATP-γS (no hydrolysis)', cell: '', value: 'existing pool still released, functional refill blocked, number of vesicles on ribbons normal: so capture and priming must be separate switches', source: 'Heidelberger, Sterling, Matthews 2002 J Neurophysiol 88:98, 10.1152/jn.00039.2002', status: 'looked up' },
  { id: 'H-74', quantity: 'EGTA, chick hair cell', cell: '', value: 'blocks recovery and second component', source: 'Spassova et al. 2004 (H-60)', status: 'looked up' },
  { id: 'H-75', quantity: 'temperature 22–24 → 35–37 °C, calyx (no ribbon)', cell: '', value: 'recovery rate × 2 (Q10 about 1.7: 2^(10/13) = 1.704, computed), pool size unchanged', source: 'Kushmerick, Renden, von Gersdorff 2006 J Neurosci 26:1366, 10.1523/JNEUROSCI.3889-05.2006', status: 'looked up' },
  { id: 'H-76', quantity: 'temperature 25 → 35–37 °C, inner hair cell', cell: '', value: 'Ca²⁺ current Q10 1.3, fast exocytosis Q10 2.1, sustained rate not changed', source: 'J Physiol (PMC2277147)', status: 'looked up' },
  { id: 'H-77', quantity: 'release away from ribbons', cell: '', value: 'exists in mouse rod bipolar and fish, separate pool, driven by global Ca²⁺', source: 'PubMed Central PMC4004811', status: 'looked up' },
  { id: 'H-78', quantity: 'compound fusion', cell: '', value: 'proposed for frog saccule (Edmonds 2004), argued against for bullfrog papilla (Graydon et al. 2011 J Neurosci 31:16637, 10.1523/JNEUROSCI.1866-11.2011)', source: 'both papers as named', status: 'looked up' },
  { id: 'H-79', quantity: 'crowded diffusion along the ribbon', cell: '', value: 'passive movement suffices to reproduce release and refill in rat rod bipolar', source: 'Graydon et al. 2014 (PMC4078077)', status: 'looked up' },
]
