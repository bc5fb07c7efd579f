/** The import of a file: what is read, what is kept of it, under which names; sent only when a person says so. */
import type { Page } from '#shared/schemas/api/bench'
import type { KeptMapping, RecordingDetail, RecordingRow, Upload } from '#shared/schemas/api/recording'
import type { ReadingChoices } from '#shared/recordings/choices'
import { UNNAMED } from '#shared/recordings/conditions'
import { UNTOUCHED, type ConditionData } from '#shared/recordings/types'
import { capital } from '#shared/schemas/text'
import { parseQuantity } from '#shared/units'
import { recordingSummary } from '~/utils/recordingSeries'

export interface KeepDraft { from: string, keep: boolean, title: string, condition: string, protocol: string, manipulation: string, data: ConditionData, summary: string }

/** A file that names no condition is called after itself. */
const baseName = (fileName: string) => fileName.replace(/\.[^.]*$/, '').replace(/[_-]+/g, ' ').trim()

function draftOf(data: ConditionData, fileName: string, protocols: readonly string[]): KeepDraft {
  const named = data.condition === UNNAMED.condition ? { ...data, condition: baseName(fileName) || data.condition } : data
  const cells = new Set(data.cells.map(cell => cell.cell)).size, n = Math.max(0, ...data.points.map(point => point.n ?? 0))
  const count = cells || n
  return {
    from: data.condition, keep: true, title: `${capital(named.condition)}${count ? `, ${count} ${count === 1 ? 'cell' : 'cells'}` : ''}`,
    condition: named.condition, protocol: data.protocol === UNNAMED.protocol ? protocols[0] ?? data.protocol : data.protocol, manipulation: data.manipulation || UNTOUCHED, data, summary: recordingSummary(data),
  }
}

export function useImport() {
  const api = useApi()
  const session = useSessionStore()
  const source = useFileReading()
  const drafts = ref<KeepDraft[]>([])
  const details = ref({ firstStimulus: '', solution: '', animal: '', temperature: '', unit: 'cell', notes: '' })
  const tags = ref<string[]>([])
  const keepMapping = ref(false)
  const offered = shallowRef<KeptMapping | null>(null)
  const already = shallowRef<Upload['already']>([])
  let asked = ''
  /** Names that the bench uses already, offered while typing. */
  const list = useRead<Page<RecordingRow>>(() => session.bench ? `/api/benches/${session.bench.benchId}/recordings?limit=100` : null)
  const known = computed(() => {
    const rows = list.answer.value?.rows ?? [], names = (of: (row: RecordingRow) => string) => [...new Set(rows.map(of))]
    return { conditions: names(row => row.condition), protocols: names(row => row.protocol), manipulations: [...new Set([UNTOUCHED, ...names(row => row.manipulation)])] }
  })

  const reading = computed(() => source.read.value?.ok ? source.read.value.reading : null)
  watch(reading, (now) => {
    // Names that a person typed stay with their condition while choices change.
    drafts.value = (now?.conditions ?? []).map((data) => {
      const before = drafts.value.find(draft => draft.from === data.condition)
      return before ? { ...before, data, summary: recordingSummary(data) } : draftOf(data, source.file.value?.name ?? '', known.value.protocols)
    })
    if (now && asked === '') void ask(now.shape)
  })
  async function ask(shape: string) {
    asked = shape
    const found = await api<{ mapping: KeptMapping | null }>(`/api/benches/${session.bench!.benchId}/mappings`, { query: { shape } }).catch(() => null)
    offered.value = found?.mapping ?? null
  }
  async function open(name: string, bytes: Blob) {
    asked = ''
    offered.value = null
    already.value = []
    drafts.value = []
    await source.open(name, bytes)
  }
  function useOffered() {
    if (offered.value) source.replace(offered.value.choices as ReadingChoices)
    offered.value = null
  }

  /** Why it cannot be kept yet; empty when it can. */
  const obstacle = computed(() => {
    if (!reading.value) return source.read.value ? 'Nothing was read' : 'Reading'
    const open = reading.value.questions.filter(question => question.must).length
    if (open > 0) return `Answer ${open} ${open === 1 ? 'question' : 'questions'} first`
    if (!reading.value.ready) return 'Nothing can be kept yet'
    if (!drafts.value.some(draft => draft.keep)) return 'Choose a condition first'
    if (temperature.value === 'wrong') return 'Correct the temperature first'
    return drafts.value.some(draft => draft.keep && [draft.title, draft.condition, draft.protocol, draft.manipulation].some(text => text.trim() === '')) ? 'A name is missing' : ''
  })
  const temperature = computed((): number | null | 'wrong' => {
    if (details.value.temperature.trim() === '') return null
    const found = parseQuantity(details.value.temperature, '1')
    return found.kind === 'ok' && found.value >= -10 && found.value <= 60 ? found.value : 'wrong'
  })

  const keeping = useAction(async () => {
    const file = source.file.value
    if (!file || obstacle.value || !session.bench) return
    const at = `/api/benches/${session.bench.benchId}`
    const upload = await api<Upload>(`${at}/uploads`, { method: 'POST', query: { name: file.name }, body: file.bytes, headers: { 'content-type': 'application/octet-stream' } })
    if (upload.already.length > 0 && already.value.length === 0) {
      already.value = upload.already
      return
    }
    const { firstStimulus, solution, animal, unit, notes } = details.value
    const made = await api<RecordingDetail[]>(`${at}/recordings`, { method: 'POST', body: {
      uploadId: upload.uploadId, choices: source.choices.value, keepMapping: keepMapping.value, tags: tags.value, notes,
      keep: drafts.value.filter(draft => draft.keep).map(({ from, title, condition, protocol, manipulation }) => ({ from, title, condition, protocol, manipulation })),
      details: { firstStimulus, solution, animal, temperatureC: temperature.value, experimentalUnit: unit },
    } })
    await navigateTo(made.length === 1 ? `/recordings/${made[0]!.recordingId}` : '/recordings')
  })
  return { source, reading, known, drafts, details, tags, keepMapping, offered, already, obstacle, keeping, open, useOffered }
}
