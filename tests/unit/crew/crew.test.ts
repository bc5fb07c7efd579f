/** The crew with real worker threads: same digest on any number of workers, cancel, crash, target, preview. */
import { afterAll, afterEach, describe, expect, it, vi } from 'vitest'
import { createCrew } from '../../../workers/crew'
import { Member, WorkerLost } from '../../../workers/member'
import type { Crew, RunOrder, RunProgress } from '../../../workers/protocol'
import type { WorkerHandle } from '../../../workers/member'
import { mergeAll } from '../../../shared/walk/merge'
import { smallScenario } from '../outcome/walked'
import { brokenThread, countedThreads, dyingAfter, heldScenario, silentThread } from './support'

// A busy machine takes seconds to start a thread or a process.
vi.setConfig({ testTimeout: 180_000 })

const crews: Crew[] = []
function ownCrew(size: number, createWorker: () => WorkerHandle): Crew {
  const crew = createCrew({ createWorker, size })
  crews.push(crew)
  return crew
}
afterEach(() => crews.splice(0).forEach(crew => crew.dismiss()))

/** Sound crews are shared by the tests: to start a thread costs more than to walk. */
const shared = new Map<number, Crew>()
function crewOf(size: number): Crew {
  const crew = shared.get(size) ?? createCrew({ createWorker: countedThreads().createWorker, size, idleMs: 600_000 })
  shared.set(size, crew)
  return crew
}
afterAll(() => shared.forEach(crew => crew.dismiss()))

const order: RunOrder = { scenario: heldScenario, seed: 'kp-14', replicates: 220, algorithm: 'step' }
const digestOf = async (crew: Crew, asked = order) => (await crew.conclude(asked.scenario, await crew.run(asked))).digest

describe('one outcome on any number of workers', () => {
  it.each(['step', 'touch', 'attempt'] as const)('%s: 1, 2 and 3 workers give the same digest', async (algorithm) => {
    const asked = { ...order, algorithm }
    const digests = [await digestOf(crewOf(1), asked), await digestOf(crewOf(2), asked), await digestOf(crewOf(3), asked)]
    expect(new Set(digests).size).toBe(1)
    expect(digests[0]).toMatch(/^[0-9a-f]{64}$/)
  })

  it('blocks are the canonical ones, progress rises to the end and names its workers', async () => {
    const progress: RunProgress[] = []
    const result = await crewOf(2).run(order, { onProgress: one => progress.push({ ...one }) })
    expect(result).toMatchObject({ replicates: 220, replicatesAsked: 220, partial: false, workers: 2, seed: 'kp-14', engine: { algorithm: 'step' } })
    expect(result.blocks.map(({ from, to }) => [from, to])).toEqual([[0, 50], [50, 100], [100, 150], [150, 200], [200, 220]])
    expect(progress.length).toBeGreaterThan(4)
    progress.slice(1).forEach((one, i) => expect(one.replicatesDone).toBeGreaterThan(progress[i]!.replicatesDone))
    expect(progress.at(-1)!.replicatesDone).toBe(220)
    for (const { blocks } of progress) {
      expect(blocks[0]?.from ?? 0).toBe(0)
      blocks.slice(1).forEach((block, i) => expect(block.from).toBe(blocks[i]!.to))
    }
  })

  it('a second run waits for the first; workers start on first need only', async () => {
    const { count, createWorker } = countedThreads()
    const crew = ownCrew(2, createWorker)
    expect(count.started).toBe(0)
    const [one, other] = await Promise.all([crew.run(order), crew.run({ ...order, replicates: 60 })])
    expect(one.replicates).toBe(220)
    expect(other.blocks[0]).toEqual(one.blocks[0])
    expect(count.started).toBe(2)
    expect(crew.pace).toBeGreaterThan(0)
  })

  it('refuses what cannot be walked', async () => {
    const exclusive = { ...heldScenario, medium: { ...heldScenario.medium, crowding: 'exclusive' as const } }
    await expect(crewOf(1).run({ ...order, scenario: exclusive, algorithm: 'attempt' })).rejects.toThrow(/step-by-step/)
  })
})

describe('cancel', () => {
  it('answers within a second, keeps the contiguous prefix, and the prefix equals that of the full run', async () => {
    const full = await crewOf(1).run({ ...order, replicates: 400 })
    const crew = crewOf(2), stop = new AbortController()
    let askedAt = 0, doneWhenAsked = 0
    const result = await crew.run({ ...order, replicates: 400 }, { signal: stop.signal, onProgress: ({ replicatesDone }) => {
      if (replicatesDone >= 130 && !stop.signal.aborted) {
        askedAt = performance.now()
        doneWhenAsked = replicatesDone
        stop.abort()
      }
    } })
    expect(performance.now() - askedAt).toBeLessThan(1000)
    expect(result).toMatchObject({ partial: true, replicatesAsked: 400 })
    expect(result.replicates).toBeGreaterThan(0)
    expect(result.replicates).toBeLessThan(400)
    expect(result.replicates).toBeGreaterThanOrEqual(doneWhenAsked - 2 * 50) // at most what the two workers held is lost
    const last = result.blocks.at(-1)!
    expect(result.blocks.slice(0, -1)).toEqual(full.blocks.slice(0, result.blocks.length - 1))
    // The last block is cut short: walked again as such, it and the whole document are the same.
    const again = await crew.run({ ...order, ranges: result.blocks.map(({ from, to }) => ({ from, to })) })
    expect(again.blocks).toEqual(result.blocks)
    expect(last.to).toBe(result.replicates)
    expect((await crew.conclude(order.scenario, { ...again, partial: true })).digest).toBe((await crew.conclude(order.scenario, result)).digest)
  })

  it('before the first replicate there is nothing, and the crew works on', async () => {
    const crew = crewOf(1)
    const none = await crew.run(order, { signal: AbortSignal.abort() })
    expect(none).toMatchObject({ replicates: 0, blocks: [], partial: true })
    expect((await crew.run({ ...order, replicates: 50 })).replicates).toBe(50)
  })
})

describe('lost workers', () => {
  it('a worker that dies in the middle of a block is replaced and its block repeated with the same result', async () => {
    const honest = await crewOf(1).run(order)
    const alone = countedThreads((handle, number) => number === 1 ? dyingAfter(handle, 4) : handle)
    expect((await ownCrew(1, alone.createWorker).run(order)).blocks).toEqual(honest.blocks)
    expect(alone.count.started).toBe(2)
    // Of two, the second may finish everything before the first is missed.
    const two = countedThreads((handle, number) => number <= 2 ? dyingAfter(handle, 3 + number) : handle)
    expect((await ownCrew(2, two.createWorker).run(order)).blocks).toEqual(honest.blocks)
  })

  it('gives up after three in a row and says which replicates were lost', async () => {
    const { count, createWorker } = countedThreads()
    const crew = ownCrew(1, () => {
      createWorker().terminate()
      return brokenThread()
    })
    await expect(crew.run(order)).rejects.toThrow(/Replicates 0 to \d+ were lost with 3 workers in a row: this script is broken/)
    expect(count.started).toBe(3)
  })

  it('a worker that gives no sign is ended', async () => {
    const member = new Member(silentThread)
    await expect(member.prepare({ scenario: heldScenario, algorithm: 'step', seed: 'x' }, 200)).rejects.toThrow(WorkerLost)
  })

  it('workers at rest are ended', async () => {
    const { count, createWorker } = countedThreads()
    const crew = createCrew({ createWorker, size: 1, idleMs: 50 })
    await crew.run({ ...order, replicates: 10 })
    await new Promise(resolve => setTimeout(resolve, 200))
    expect(count.alive).toBe(0)
    crew.dismiss()
  })
})

describe('target standard error', () => {
  const asked: RunOrder = { scenario: smallScenario(), seed: 'target', replicates: 5000, algorithm: 'auto', targetStandardError: 0.015 }
  it('stops at the same replicate on 1 and 3 workers, earlier for a wider target; the outcome is that of a plain run', async () => {
    const one = await crewOf(1).run(asked), three = await crewOf(3).run(asked)
    expect(one.replicates).toBeLessThan(5000)
    expect(one.partial).toBe(false)
    expect(three.blocks).toEqual(one.blocks)
    const plain = await crewOf(1).run({ ...asked, replicates: one.replicates, targetStandardError: undefined })
    expect(plain.blocks).toEqual(one.blocks)
    expect((await crewOf(1).run({ ...asked, targetStandardError: 0.05 })).replicates).toBeLessThan(one.replicates)
  })
  it('ends at the cap when the target is out of reach', async () => {
    const result = await crewOf(2).run({ ...asked, replicates: 120, targetStandardError: 1e-6 })
    expect(result).toMatchObject({ replicates: 120, replicatesAsked: 120, partial: false })
  })
})

describe('preview', () => {
  it('grows chunk by chunk to the same block as a run of seed “preview”', async () => {
    const crew = crewOf(1), grown: number[] = []
    const result = (await crew.preview(heldScenario, 60, one => grown.push(one.replicates)))!
    expect(result).toMatchObject({ replicates: 60, partial: false, seed: 'preview' })
    expect(grown.length).toBeGreaterThan(0)
    grown.slice(1).forEach((count, i) => expect(count).toBeGreaterThan(grown[i]!))
    const run = await crew.run({ scenario: heldScenario, seed: 'preview', replicates: 60, algorithm: 'auto' })
    expect(mergeAll(run.blocks)).toEqual(result.blocks[0])
  })

  it('a newer question supersedes the older ones, on one warm worker', async () => {
    const { count, createWorker } = countedThreads()
    const crew = ownCrew(1, createWorker)
    await crew.preview(heldScenario, 10)
    const answers = await Promise.all([0.1, 0.2, 0.3].map(attachProbability =>
      crew.preview({ ...heldScenario, sites: heldScenario.sites.map(site => ({ ...site, attachProbability })) }, 40)))
    expect(answers.map(answer => answer?.replicates ?? null)).toEqual([null, null, 40])
    expect(count.started).toBe(1)
  })

  it('survives the loss of its worker once', async () => {
    const { count, createWorker } = countedThreads((handle, number) => number === 1 ? dyingAfter(handle, 2) : handle)
    expect((await ownCrew(1, createWorker).preview(heldScenario, 60))?.replicates).toBe(60)
    expect(count.started).toBe(2)
  })
})
