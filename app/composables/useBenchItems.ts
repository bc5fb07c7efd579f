/** A list of the bench's items: found, paged, put in the bin and taken back. */
import { BIN_DAYS } from '#shared/bin'

export interface BenchItems<Row, Name extends string> {
  /** Name in addresses: `/api/benches/:benchId/runs`, `/api/runs/:id`, page `/runs`. */
  kind: string
  /** What the address of the page keeps besides the bin. */
  keys: readonly Name[]
  id: (row: Row) => string
  /** As a sentence calls it. */
  nameOf: (row: Row) => string
}

export function useBenchItems<Row, Name extends string>({ kind, keys, id, nameOf }: BenchItems<Row, Name>) {
  const api = useApi()
  const session = useSessionStore()
  const benchId = computed(() => session.bench?.benchId ?? null)
  const { query, set } = useListQuery<Name | 'bin'>([...keys, 'bin'])
  const inBin = computed(() => query.value.bin === '1')
  const paged = usePaged<Row>(() => benchId.value ? `/api/benches/${benchId.value}/${kind}` : null, () => ({ ...query.value }))
  // An address that was typed by hand or cut off: the list without it instead of a page that cannot be drawn.
  watch(paged.refusal, (refusal) => {
    if (refusal?.code === 'bad_input') set(Object.fromEntries(keys.map(name => [name, undefined])) as Partial<Record<Name | 'bin', undefined>>)
  })
  const empty = computed(() => paged.known.value && paged.rows.value.length === 0)
  /** The last thing done, with its way back. */
  const done = shallowRef<{ sentence: string, back?: () => unknown }>()
  const change = useAction(async (what: 'bin' | 'restore', row: Row) => {
    const address = `/api/${kind}/${id(row)}`
    if (what === 'bin') await api(address, { method: 'DELETE' })
    else await api(`${address}/restore`, { method: 'POST' })
    done.value = what === 'bin'
      ? { sentence: `${nameOf(row)} is in the bin for ${BIN_DAYS} days.`, back: () => change.run('restore', row) }
      : { sentence: `${nameOf(row)} is back among the ${kind}.` }
    await paged.reload()
  })
  return { ...paged, api, benchId, query, set, inBin, empty, done, change }
}
