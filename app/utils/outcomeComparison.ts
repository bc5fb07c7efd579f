/** Why two outcomes differ, and by how much: revision fields, engine, seed, replicates, and the ratio with its interval. */
import { scenarioDifferences, valueWords } from '#shared/schemas/differences'
import type { OutcomeSubject } from './outcomeSubject'
import { stepCheck, type StepCheck } from './stepCheck'

export interface ComparedField { name: string, values: string[], differs: boolean }
export interface Comparison {
  /** One row a field that differs somewhere, in the order of the document; values in the order of the outcomes. */
  fields: ComparedField[]
  /** Against the first outcome. */
  against: { name: string, check: StepCheck | null, cause: 'nothing' | 'identical' | 'chance' | 'scenario' | 'engine' | 'several', sentence: string }[]
}

type Cause = Comparison['against'][number]['cause']

/** What sets one outcome apart from the first. */
function causeOf(first: OutcomeSubject, other: OutcomeSubject): Cause {
  const scenario = first.outcome.scenarioDigest !== other.outcome.scenarioDigest
  const engine = first.outcome.engine.version !== other.outcome.engine.version || first.outcome.engine.algorithm !== other.outcome.engine.algorithm
  if (scenario && engine) return 'several'
  if (scenario) return 'scenario'
  if (engine) return 'engine'
  if (first.outcome.digest === other.outcome.digest) return 'identical'
  return first.outcome.seed === other.outcome.seed ? 'nothing' : 'chance'
}

const CAUSES: Record<Cause, string> = {
  identical: 'They are the same outcome: the digests are equal.',
  nothing: 'Scenario, engine and seed are the same; they differ in the number of replicates alone, and share those they both have.',
  chance: 'Scenario and engine are the same; they differ by seed or replicates alone, that is by chance.',
  scenario: 'The scenarios differ in the fields below.',
  engine: 'The scenario is the same; the engine or its algorithm is not.',
  several: 'Both the scenario and the engine differ: what is due to which cannot be told from these two alone.',
}
const RESOLVED = (check: StepCheck | null) => check === null
  ? ' One of the two has no interval, so their ratios cannot be compared.'
  : check.agree ? ' The difference of their ratios is within its 95\u00A0% interval.' : ' The difference of their ratios is beyond its 95\u00A0% interval.'

function runFields(subjects: readonly OutcomeSubject[]): ComparedField[] {
  const row = (name: string, read: (subject: OutcomeSubject) => string) => {
    const values = subjects.map(read)
    return { name, values, differs: new Set(values).size > 1 }
  }
  return [
    row('Seed', subject => subject.outcome.seed),
    row('Replicates', subject => `${subject.outcome.replicates}${subject.outcome.partial ? ', partial' : ''}`),
    row('Engine', subject => `${subject.outcome.engine.algorithm} ${subject.outcome.engine.version}`),
  ]
}

function scenarioFields(subjects: readonly OutcomeSubject[]): ComparedField[] {
  const [first, ...others] = subjects
  const found = new Map<string, { name: string, unit: string, base: unknown, after: Map<number, unknown> }>()
  others.forEach((other, i) => {
    for (const one of scenarioDifferences(first!.scenario, other.scenario)) {
      if (one.path === 'title' || one.path === 'notes') continue
      const field = found.get(one.path) ?? { name: one.label, unit: one.unit, base: one.before, after: new Map<number, unknown>() }
      field.after.set(i + 1, one.after)
      found.set(one.path, field)
    }
  })
  return [...found.values()].map(({ name, unit, base, after }) => ({
    name, values: subjects.map((_, i) => valueWords(after.has(i) ? after.get(i) : base, unit)), differs: true,
  }))
}

/** Compares outcomes against the first of them; `names` as the page calls them. */
export function compareOutcomes(subjects: readonly OutcomeSubject[], names: readonly string[]): Comparison {
  const [first, ...others] = subjects
  if (!first) return { fields: [], against: [] }
  return {
    fields: [...scenarioFields(subjects), ...runFields(subjects).filter(field => field.differs)],
    against: others.map((other, i) => {
      const check = stepCheck(first.outcome, other.outcome)
      const cause = causeOf(first, other)
      return { name: names[i + 1] ?? '', check, cause, sentence: CAUSES[cause] + (cause === 'identical' ? '' : RESOLVED(check)) }
    }),
  }
}
