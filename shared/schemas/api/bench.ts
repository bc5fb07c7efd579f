/** Bodies of /api/benches. */
import { z } from 'zod'
import { ROLES, type Role } from '../../permissions'
import { neutraliseText } from '../text'
import type { Outcome } from '../outcome'

/** POST /api/benches → Bench (the maker becomes its lead) · PATCH /api/benches/:benchId */
export const BenchEditSchema = z.strictObject({
  name: z.string().transform(neutraliseText).pipe(z.string().min(1, 'A bench needs a name.').max(120, 'At most 120 characters.')),
})
/** PATCH /api/benches/:benchId/members/:userId · DELETE removes; the last lead stays (409). */
export const MemberEditSchema = z.strictObject({ role: z.enum(ROLES) })

/** GET /api/benches/:benchId */
export interface Bench { benchId: string, name: string, role: Role, createdAt: string }
/** GET /api/benches/:benchId/members */
export interface Member { userId: string, name: string, mail: string, role: Role, since: string }
/** GET /api/benches/:benchId/home: what stands where, newest first, at most 10 of each */
export interface BenchHome {
  bench: Bench
  scenarios: {
    scenarioId: string, title: string, revision: number, updatedAt: string
    lastRun: { runId: string, number: number, savedAt: string, ratio: Outcome['ratio'], verdict: Outcome['agreement']['verdict'], classes: { name: string, tau: Outcome['classes'][number]['tau'] }[], curve: [number, number][] } | null
  }[]
  scenarioCount: number
  /** Sentence parts: the page writes the words. */
  changes: { kind: 'scenario-created' | 'revision-saved' | 'scenario-binned' | 'scenario-restored' | 'run-saved' | 'run-binned' | 'recording-kept' | 'recording-changed' | 'recording-binned' | 'weigh-up-saved' | 'weigh-up-binned', who: string, at: string, scenarioId: string | null, title: string, revision: number | null, runId: string | null, runNumber: number | null, recordingId: string | null, weighUpId: string | null, /** What of it lies in the bin now. */ binned: 'scenario' | 'run' | 'recording' | 'weigh-up' | null }[]
  members: { name: string, role: Role }[]
}
/** Every list: `?cursor=` from the last answer, `?limit=` 1…100 (default 25). */
export interface Page<Row> { rows: Row[], nextCursor: string | null }
