/** Digests: lower-case hex SHA-256 over RFC 8785 text. Plain code, so that no secure context is needed in a browser. */
import { sha256 } from '@noble/hashes/sha2.js'
import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js'
import type { Scenario } from '../schemas/scenario'
import { canonicalText } from './canonical'
import type { EngineId, ReplicateBlock } from './types'

/** SHA-256 of a text's UTF-8 bytes, lower-case hex. */
export const digestOfText = (text: string): string => bytesToHex(sha256(utf8ToBytes(text)))
/** SHA-256 of a value's canonical text, lower-case hex. */
export const digestOf = (value: unknown): string => digestOfText(canonicalText(value))

/** What a scenario's digest covers: everything that can move a number. Title, notes and class names cannot. */
export function digestedScenario(scenario: Scenario) {
  const { format, version, medium, ribbon, reservoir, schedule } = scenario
  const unnamed = <T extends { name: string }>({ name: _name, ...rest }: T) => rest
  return { format, version, medium, ribbon, reservoir, sites: scenario.sites.map(unnamed), vesicles: scenario.vesicles.map(unnamed), schedule }
}

/** Digest of a scenario whose defaults are filled in (as `ScenarioSchema` returns it). */
export const scenarioDigest = (scenario: Scenario): string => digestOf(digestedScenario(scenario))

/** Digest of one block: integers only, so that it is the same wherever the block was walked. */
export const blockDigest = (block: ReplicateBlock): string => digestOf(block)

export interface OutcomeIdentity { scenarioDigest: string, engine: EngineId, seed: string, replicates: number, blockDigests: string[] }
/** Digest of an outcome. It covers what was asked and the blocks; every figure follows from them. */
export const outcomeDigest = ({ scenarioDigest, engine, seed, replicates, blockDigests }: OutcomeIdentity): string =>
  digestOf({ scenarioDigest, engine: { name: engine.name, version: engine.version, algorithm: engine.algorithm }, seed, replicates, blocks: blockDigests })
