/** One file under the reader: its bytes stay with a worker, each change of a choice reads it again. */
import { transfer, wrap, type Remote } from 'comlink'
import { withAnswer, type ReadingChoices } from '#shared/recordings/choices'
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
  /** Adds an answer. */
  function choose(change: ReadingChoices) {
    choices.value = withAnswer(choices.value, change)
    void again()
  }
  /** Lines left out by hand, as a whole. */
  function leaveOut(leftOut: NonNullable<ReadingChoices['leftOut']>) {
    replace({ ...choices.value, leftOut })
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
  return { file: shallowReadonly(file), read: shallowReadonly(read), choices: shallowReadonly(choices), reading: readonly(reading), open, choose, leaveOut, replace, close }
}
