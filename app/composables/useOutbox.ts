/** Finished runs on this device, per account, until the bench has them. Private mode and a full disk are told, not hidden. */
import { createStore, del, entries, get, set, type UseStore } from 'idb-keyval'
import type { ReplicateBlock } from '#shared/walk/types'
import type { LocalRun } from '~/utils/localRun'

export interface KeptRun { run: LocalRun, blocks: ReplicateBlock[] }
const keyOf = (userId: string, localId: string) => `${userId}:${localId}`
let store: UseStore | undefined
/** A browser without storage throws at once; one that is full throws at the write. */
const opened = () => store ??= createStore('moorage-runs', 'runs')

export function useOutbox() {
  async function keep(run: LocalRun, blocks: ReplicateBlock[]): Promise<boolean> {
    try {
      await set(keyOf(run.userId, run.localId), { run: { ...run, kept: 'device' }, blocks } satisfies KeptRun, opened())
      return true
    } catch {
      return false
    }
  }
  async function read(userId: string, localId: string): Promise<KeptRun | undefined> {
    try {
      return await get<KeptRun>(keyOf(userId, localId), opened())
    } catch {
      return undefined
    }
  }
  async function all(userId: string): Promise<KeptRun[]> {
    try {
      const found = await entries<string, KeptRun>(opened())
      return found.filter(([key]) => key.startsWith(`${userId}:`)).map(([, kept]) => kept)
    } catch {
      return []
    }
  }
  async function drop(userId: string, localId: string): Promise<void> {
    try {
      await del(keyOf(userId, localId), opened())
    } catch { /* nothing was kept, so nothing is lost */ }
  }
  return { keep, read, all, drop }
}
