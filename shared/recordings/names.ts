/** What a column's name says: its meaning, its unit, and how sure that is. */
import type { Meaning } from './reading'

export interface NameRead {
  meaning: Meaning | null
  /** `bar`: an error of a kind that the name does not say. */
  bar: boolean
  /** As a unit is written in the name or the unit line; empty where none is. */
  unit: string
}

/** Names and units are shorter; what is longer is text [characters]. */
const LONGEST = 80

/** Spellings of units in recordings, folded; what each stands for. */
const UNIT_WORDS: Record<string, string> = {
  's': 's', 'sec': 's', 'secs': 's', 'second': 's', 'seconds': 's', 'sekunden': 's',
  'min': 'min', 'minutes': 'min', 'ms': 'ms', 'msec': 'ms', 'msecs': 'ms', 'millisecond': 'ms', 'milliseconds': 'ms',
  '%': '%', 'percent': '%', 'per cent': '%', 'pct': '%', 'prozent': '%', '% of first': '%', '% of control': '%',
  'pa': 'pA', 'na': 'nA', 'ff': 'fF', 'af': 'aF', 'pf': 'pF', 'mv': 'mV', 'v': 'V', '1': '1', 'ratio': '1', 'fraction': '1', 'count': 'count', 'cells': 'count', 'a.u.': 'a.u.', 'au': 'a.u.',
}

const fold = (text: string) => text.normalize('NFKC').toLowerCase().replace(/[\u03B4\u2206\u0394]/g, 'delta').replace(/\s+/g, ' ').trim()

/**
 * The unit that a cell of a unit line says.
 * @param cell - `s`, `[ms]`, `(%)`, `pA`
 * @returns the unit as it is written in the product, or null where the cell is no unit
 */
export function unitWord(cell: string): string | null {
  if (cell.trim().length > LONGEST) return null
  const bare = fold(cell).replace(/^[[(]\s*(.*?)\s*[\])]$/, '$1').trim()
  return Object.hasOwn(UNIT_WORDS, bare) ? UNIT_WORDS[bare]! : null
}

/** Name and unit apart: `interval_ms`, `Delta t [ms]`, `dt / s`, `recovery (%)`, `% of control`. */
function apart(name: string): { bare: string, unit: string } {
  const folded = fold(name)
  const bracketed = /^(.*?)\s*[[(]\s*([^[\]()]+?)\s*[\])]\s*$/.exec(folded)
  if (bracketed && unitWord(bracketed[2]!) !== null) return { bare: bracketed[1]!, unit: unitWord(bracketed[2]!)! }
  const tail = /^(.+?)(?:_|\s*\/\s*|,\s*|\s+in\s+|\s+)(%|[a-z.]+)$/.exec(folded)
  const unit = tail ? unitWord(tail[2]!) : null
  if (tail && unit !== null && !['1', 'count', 'V'].includes(unit)) return { bare: tail[1]!, unit }
  return folded.includes('%') && !/95\s*%/.test(folded) ? { bare: folded.replaceAll('%', ' ').trim(), unit: '%' } : { bare: folded, unit: '' }
}

const words = (...list: string[]) => new RegExp(`^(?:${list.join('|')})$`)
const limit = (side: string) => new RegExp(`^(?:ratio )?(?:95 ?%? ?)?(?:(?:ci|cl) ?)?(?:95 ?%? ?)?(?:${side})(?: ?95 ?%?)?(?: ?(?:ci|cl|limit|bound))?(?: ?95 ?%?)?$`)
/** Asked in this order: an error of a ratio is an error, `Cm2/Cm1` is no first response. */
const NAMES: [RegExp, Meaning | 'bar'][] = [
  [limit('lower|low|lo|ll|lcl'), 'lower-limit'],
  [limit('upper|high|hi|up|ul|ucl'), 'upper-limit'],
  [/(?:^| )(?:s ?e ?m|se|std ?err(?:or)?|standard error(?: of the mean)?|stderr|standardfehler)(?: |$)/, 'sem'],
  [/(?:^| )(?:s ?d|std|stdev|st dev|std dev|standard deviation|standardabweichung)(?: |$)/, 'sd'],
  [/(?:^| )(?:half ?width|ci|ci ?95|95 ?ci|95 ?% ?ci|ci 95 ?%|confidence(?: interval)?|moe)(?: |$)/, 'half-width'],
  [/(?:^| )(?:err|error|errors|error bar|errorbar|bar|uncertainty|fehler|\+ ?-|±)(?: |$)/, 'bar'],
  [words('n', 'count', '(?:n|no|num|number)(?: of)? ?(?:cells|sites|recordings|obs|observations)?', 'cells', 'ncells', '# ?cells', 'anzahl', 'sample size'), 'n'],
  [words('cell', 'cell (?:id|name|no|nr|number)', 'cellid', 'neuron', 'recording', 'zelle', 'rod', 'bipolar cell', 'id'), 'cell'],
  [words('condition', 'conditions', 'group', 'treatment', 'drug', 'bedingung', 'gruppe'), 'condition'],
  [words('protocol', 'stimulus', 'stim', 'stim protocol', 'protokoll', 'first stimulus'), 'protocol'],
  [words('manipulation', 'perturbation', 'intervention'), 'manipulation'],
  [words('set aside', 'aside', 'reason set aside'), 'aside'],
  [/^(?:cm|capacitance|membrane capacitance|c m|delta ?cm trace|kapazität)$/, 'capacitance'],
  [/^(?:v ?cmd|v ?command|command|voltage|vm|v m|v hold|kommando)$/, 'command'],
  [/^(?:delta )?(?:cm|epsc|ipsc|psc|p|a|r|resp|response|peak|amp|amplitude|pulse) ?2 ?[/:÷] ?(?:delta )?(?:cm|epsc|ipsc|psc|p|a|r|resp|response|peak|amp|amplitude|pulse) ?1$/, 'ratio'],
  [words('ppr', 'ppr ratio', 'paired pulse ratio', 'ratio', 'mean ratio', 'ratio mean', 'recovery', 'mean recovery', 'recovery mean', 'recovery ratio', 'recovered', 'recovered fraction',
    'fraction', 'fraction recovered', 'of (?:control|first)', 'recovery(?: of)? (?:control|first)', 'mean', 'normali[sz]ed(?: response)?', 'second ?/ ?first', 'erholung', 'mittelwert'), 'ratio'],
  [words('(?:first|1st)(?: response| pulse| epsc| peak| amplitude)?', '(?:delta )?(?:cm|epsc|ipsc|psc|p|a|r|resp|response|peak|amp|amplitude|pulse) ?1'), 'first'],
  [words('(?:second|2nd)(?: response| pulse| epsc| peak| amplitude)?', '(?:delta )?(?:cm|epsc|ipsc|psc|p|a|r|resp|response|peak|amp|amplitude|pulse) ?2'), 'second'],
  [words('interval', 'intervals', 'intervall', 'dt', 'delta ?t', 'isi', 'ipi', 'ipsi', 'inter ?stimulus interval', 'inter ?pulse interval', 'recovery (?:interval|time)', 'delay', 'gap', 'lag', 'pulse interval', 'zeit(?:abstand)?', 'abstand'), 'interval'],
  [words('time', 't', 'zeit', 'time point', 'elapsed'), 'time'],
]

/**
 * What a column's name says. `time` may be an interval; who reads the whole header decides.
 * @param name - as in the header
 * @returns meaning (null: none known here), whether it is an unlabelled bar, and the unit in the name
 */
export function readName(name: string): NameRead {
  const { bare, unit } = apart(name.trim().slice(0, LONGEST))
  const plain = bare.replace(/±/g, ' ± ').replace(/[._\-()[\]:]+/g, ' ').replace(/\s+/g, ' ').trim()
  const found = NAMES.find(([pattern]) => pattern.test(plain))?.[1] ?? null
  return found === 'bar' ? { meaning: null, bar: true, unit } : { meaning: found ?? (unit === '%' && /^(?:control|first)?$/.test(plain) ? 'ratio' : null), bar: false, unit }
}

/** A spreadsheet's letter for a column index from 0: A … Z, AA … */
export function letterOf(index: number): string {
  return (index >= 26 ? letterOf(Math.floor(index / 26) - 1) : '') + String.fromCharCode(65 + index % 26)
}
