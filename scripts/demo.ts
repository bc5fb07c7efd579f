/** The invented people of the demo bench. Their pass phrase is published: the server lets them in only on its own machine. */
import { randomBytes, scrypt } from 'node:crypto'
import { promisify } from 'node:util'
import type { Role } from '../shared/permissions'

export const DEMO_BENCH = 'Kestrel Point Ribbon Bench'
export const DEMO_PASS_PHRASE = 'harbour-chart-demo'
export interface DemoPerson { key: 'orla' | 'tomasz' | 'ngozi' | 'pim' | 'yuki' | 'ruben', name: string, mail: string, role: Role }
export const DEMO_PEOPLE: readonly DemoPerson[] = [
  { key: 'orla', name: 'Orla Venn', mail: 'orla.venn@kestrel-point.example', role: 'lead' },
  { key: 'tomasz', name: 'Tomasz Birk', mail: 'tomasz.birk@kestrel-point.example', role: 'member' },
  { key: 'ngozi', name: 'Ngozi Hale', mail: 'ngozi.hale@kestrel-point.example', role: 'member' },
  { key: 'pim', name: 'Pim Aster', mail: 'pim.aster@kestrel-point.example', role: 'trainee' },
  { key: 'yuki', name: 'Yuki Dorrance', mail: 'yuki.dorrance@kestrel-point.example', role: 'trainee' },
  { key: 'ruben', name: 'Ruben Castell', mail: 'ruben.castell@kestrel-point.example', role: 'guest' },
]

/** N, r and p as the server's own hashes have them: N·r·128 bytes of memory. */
const COST = { N: 131_072, r: 8, p: 1, maxmem: 268_435_456 }
const unpadded = (bytes: Buffer) => bytes.toString('base64').replace(/=+$/, '')

/** A pass phrase as the server keeps it: scrypt in PHC form. */
export async function hashPassPhrase(passPhrase: string): Promise<string> {
  const salt = randomBytes(16)
  const derive = promisify(scrypt) as (phrase: string, salt: Buffer, length: number, cost: typeof COST) => Promise<Buffer>
  return `$scrypt$n=${COST.N},r=${COST.r},p=${COST.p}$${unpadded(salt)}$${unpadded(await derive(passPhrase, salt, 64, COST))}`
}
