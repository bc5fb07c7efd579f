/** One file under the reader: its bytes stay with a worker, each change of a choice reads it again. */
import { transfer, wrap, type Remote } from 'comlink'
import type { ReadingChoices } from '#shared/recordings/choices'
import { sizeProblem } from '#shared/recordings/decode'
import { FileReadingDesk, type FileReading } from '~/utils/fileReadingDesk'

export interface OpenFile { name: string, size: number, bytes: Blob }

export function useFileReading() {
  const file = shallowRef<OpenFile | null>(null)
  const read = shallowRef<FileReading | null>(null)
  const choices = shallowRef<ReadingChoices>({})
  const reading = ref(false)
  let worker: Worker | undefined
  let desk: Remote<FileReadingDesk> | FileReadingDesk | undefined
  let turn = 0

  function start() {
    if (desk) return desk
    try {
      worker = new Worker(new URL('../workers/reading.worker.ts', import.meta.url), { type: 'module', name: 'reading' })
      desk = wrap<FileReadingDesk>(worker)
    } catch {
      desk = new FileReadingDesk() // no worker here: small files are read on the page
    }
    return desk
  }
  onScopeDispose(() => worker?.terminate())

  async function again() {
    const own = ++turn
    reading.value = true
    try {
      const found = await start().read(choices.value)
      if (own === turn) read.value = found
    } catch (thrown) {
      if (own === turn) read.value = { ok: false, problem: { path: 'file', message: `The file could not be read: ${thrown instanceof Error ? thrown.message : String(thrown)}.` } }
    } finally {
      if (own === turn) reading.value = false
    }
  }
  /** Its size is judged before a byte is read. */
  async function open(name: string, bytes: Blob) {
    choices.value = {}
    file.value = { name, size: bytes.size, bytes }
    const tooLarge = sizeProblem(bytes.size)
    if (tooLarge) {
      turn++
      read.value = { ok: false, problem: tooLarge }
      return
    }
    const held = new Uint8Array(await bytes.arrayBuffer())
    await start().open(worker ? transfer(held, [held.buffer]) : held)
    await again()
  }
  /** Adds a choice, or takes it back where a value is undefined. */
  function choose(change: ReadingChoices) {
    const columns = { ...choices.value.columns, ...change.columns }
    const leftOut = change.leftOut ?? choices.value.leftOut
    choices.value = { ...choices.value, ...change, ...(Object.keys(columns).length && { columns }), ...(leftOut && { leftOut }) }
    void again()
  }
  function replace(all: ReadingChoices) {
    choices.value = all
    void again()
  }
  function close() {
    turn++
    file.value = null
    read.value = null
    choices.value = {}
  }
  return { file: shallowReadonly(file), read: shallowReadonly(read), choices: shallowReadonly(choices), reading: readonly(reading), open, choose, replace, close }
}
