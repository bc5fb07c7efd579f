/** The reference programs as processes that stay and time themselves: compiled C, and numpy where a Python has it. */
import { spawn, spawnSync, type ChildProcess } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createInterface } from 'node:readline'
import { fileURLToPath } from 'node:url'

const HERE = fileURLToPath(new URL('.', import.meta.url))
const FLAGS = ['-O3', '-march=native', '-ffp-contract=off', '-Wall']

/** What a reference says of replicates [from, to): its own time [ms] and a number to compare work by. */
export interface Answer { milliseconds: number, check: number }

/** A running reference; one question at a time. */
export class Reference {
  private readonly lines: AsyncIterator<string>

  constructor(private readonly child: ChildProcess) {
    this.lines = createInterface({ input: child.stdout! })[Symbol.asyncIterator]()
  }

  async ask(from: number, to: number): Promise<Answer> {
    this.child.stdin!.write(`${from} ${to}\n`)
    const { value, done } = await this.lines.next()
    if (done) throw new Error('A reference program ended before it answered.')
    const [milliseconds, check] = String(value).split(' ').map(Number)
    return { milliseconds: milliseconds!, check: check! }
  }

  end(): void {
    this.child.stdin!.end()
  }
}

/** A folder of compiled programs and plan files, removed at the end. */
export class Workshop {
  private readonly folder = mkdtempSync(join(tmpdir(), 'moorage-speed-'))
  private readonly running: Reference[] = []
  private readonly compiled = new Map<string, string>()

  /** Compiles a C program once. */
  private compile(name: string): string {
    const known = this.compiled.get(name)
    if (known) return known
    const program = join(this.folder, name)
    const { status, stderr } = spawnSync('gcc', [...FLAGS, '-o', program, join(HERE, `${name}.c`), '-lm'], { encoding: 'utf8' })
    if (status !== 0) throw new Error(`gcc could not compile ${name}.c: ${stderr}`)
    this.compiled.set(name, program)
    return program
  }

  private start(program: string, words: string[]): Reference {
    const reference = new Reference(spawn(program, words, { stdio: ['pipe', 'pipe', 'inherit'] }))
    this.running.push(reference)
    return reference
  }

  private file(name: string, bytes: Buffer): string {
    const path = join(this.folder, name)
    writeFileSync(path, bytes)
    return path
  }

  /** Starts a C reference on files that are written for it. */
  c(name: string, files: Buffer[]): Reference {
    const number = this.running.length
    return this.start(this.compile(name), files.map((bytes, i) => this.file(`${name}-${number}-${i}`, bytes)))
  }

  numpy(python: string, plan: Buffer): Reference {
    return this.start(python, [join(HERE, 'walk_numpy.py'), this.file(`numpy-${this.running.length}`, plan)])
  }

  close(): void {
    for (const reference of this.running) reference.end()
    rmSync(this.folder, { recursive: true, force: true })
  }
}

/** Whether C programs can be compiled here. */
export function hasCompiler(): boolean {
  return spawnSync('gcc', ['-E', '-include', 'stdio.h', '-x', 'c', '/dev/null'], { stdio: 'ignore' }).status === 0
}

/** A Python that has numpy, or null. */
export function pythonWithNumpy(): string | null {
  return ['python3', '/usr/bin/python3'].find(python => spawnSync(python, ['-c', 'import numpy'], { stdio: 'ignore' }).status === 0) ?? null
}
