/** Judges a run as it came in and makes its outcome again. Pure: used by the worker thread, by the demo bench and by tests. */
import { RunSaveSchema, SAVED_REPLICATES_LIMIT, type RunSave } from '../../shared/schemas/api/run'
import type { Outcome } from '../../shared/schemas/outcome'
import { fieldProblems, type FieldProblem } from '../../shared/schemas/problem'
import type { Scenario } from '../../shared/schemas/scenario'
import { estimateCost } from '../../shared/walk/cost'
import { blockDigest } from '../../shared/walk/digest'
import { frameOf } from '../../shared/walk/frame'
import { buildOutcome } from '../../shared/walk/outcome'
import { lookOver } from '../utils/body'
import { badField, problem } from '../utils/problem'
import { checkBlocks } from './block-checks'

const refuseAll = (errors: FieldProblem[]) => {
  if (errors.length) throw problem('bad_input', { errors: errors.slice(0, 50) })
}

/** Bytes of a body to a run of the right shape. */
export function parseRun(raw: Uint8Array): RunSave {
  let parsed: unknown
  try {
    parsed = JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(raw))
  } catch {
    throw problem('malformed_json')
  }
  lookOver(parsed)
  const judged = RunSaveSchema.safeParse(parsed)
  if (!judged.success) refuseAll(fieldProblems(judged.error.issues))
  return judged.data!
}

/** A walk that nobody may start cannot be saved either: joint limits, and the algorithm must walk this scenario's law. */
function checkWalk(scenario: Scenario, run: RunSave) {
  const { algorithm } = run.engine
  const stirred = scenario.reservoir.supply === 'stirred'
  if (stirred !== (algorithm === 'stirred')) throw badField('engine.algorithm', `A ${scenario.reservoir.supply} supply is not walked by “${algorithm}”.`)
  const { refusals } = estimateCost(scenario, run.replicatesAsked, algorithm === 'stirred' ? 'auto' : algorithm)
  refuseAll(refusals.map(({ path, message }) => ({ path: path === 'algorithm' ? 'engine.algorithm' : path === 'replicates' ? 'replicatesAsked' : `scenario.${path}`, message })))
}

/**
 * The outcome of a run, made here from its blocks; its digest must be the one that came with it.
 * @param landingError - of the engine's tables for this scenario, asked only once the blocks have passed, never taken from the body [1]
 */
export async function examineRun(scenario: Scenario, run: RunSave, landingError: () => Promise<number>): Promise<Outcome> {
  checkWalk(scenario, run)
  const frame = frameOf(scenario)
  refuseAll(checkBlocks(frame, run))
  const replicates = run.blocks.at(-1)!.to
  if (replicates > SAVED_REPLICATES_LIMIT) throw badField('blocks', `A saved run has at most ${SAVED_REPLICATES_LIMIT.toLocaleString('en')} replicates; this one has ${replicates.toLocaleString('en')}.`)
  const outcome = buildOutcome({
    scenario, frame, seed: run.seed, engine: run.engine, blocks: run.blocks, blockDigests: run.blocks.map(blockDigest), partial: run.partial, landingError: await landingError(),
  })
  if (outcome.digest !== run.digest) throw badField('digest', `The digest of these blocks is ${outcome.digest}.`)
  return outcome
}
