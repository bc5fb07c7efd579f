/** One weigh-up under way on this device: its progress, its end, and a way to stop it. */
import { proxy } from 'comlink'
import type { WeighProgress } from '#shared/fitting/weighing/weigh-up'
import type { ConditionData } from '#shared/recordings/types'
import type { WeighSettings, WeighUp } from '#shared/schemas/weigh-up'

export function useWeighing() {
  const found = shallowRef<WeighUp | null>(null)
  const refused = ref('')
  const progress = shallowRef<WeighProgress | null>(null)
  const busy = ref(false)
  let turn = 0

  /** Weighs; a newer call or `stop` ends an older one. Returns null where it was ended. */
  async function weigh(conditions: ConditionData[], settings: WeighSettings): Promise<WeighUp | null> {
    const own = ++turn
    busy.value = true
    refused.value = ''
    const report = (now: WeighProgress) => {
      if (own === turn) progress.value = now
      return own === turn
    }
    try {
      const result = await useFitting().weigh(conditions, settings, proxy(report))
      if (own !== turn || !result) return null
      if ('refused' in result) {
        refused.value = result.refused.message
        return null
      }
      found.value = result
      return result
    } catch (thrown) {
      if (own === turn) refused.value = `The weigh-up broke off: ${thrown instanceof Error ? thrown.message : String(thrown)}.`
      return null
    } finally {
      if (own === turn) {
        busy.value = false
        progress.value = null
      }
    }
  }
  function stop() {
    turn++
    busy.value = false
    progress.value = null
  }
  onScopeDispose(stop)
  return { found, refused: readonly(refused), progress: shallowReadonly(progress), busy: readonly(busy), weigh, stop }
}
