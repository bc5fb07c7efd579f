/** Files, recordings and weigh-ups for tests; the data are the invented demo files or made up here. */
import { readFileSync } from 'node:fs'
import type { RecordingDetail, Upload } from '../../shared/schemas/api/recording'
import type { WeighUpDetail } from '../../shared/schemas/api/weigh-up'
import type { Answer, Visitor } from './visitor'

export const demoFile = (name: string) => readFileSync(new URL(`../../scripts/demo-data/${name}`, import.meta.url))

/** A small table of means, enough to fit and to weigh. */
export const TABLE = 'condition,protocol,manipulation,interval_ms,ratio_mean,ratio_sd,n\n' + [[50, 0.15], [100, 0.18], [200, 0.24], [400, 0.33], [800, 0.46], [1600, 0.59], [3200, 0.685], [6400, 0.745], [12800, 0.8], [25600, 0.89], [51200, 0.945]]
  .map(([ms, ratio]) => `control,200 ms step,none,${ms},${ratio},0.033,9`).join('\n') + '\n'

export const upload = (who: Visitor, benchId: string, bytes: Uint8Array | string, name = 'table.csv'): Promise<Answer<Upload>> =>
  who.send<Upload>('POST', `/api/benches/${benchId}/uploads?name=${encodeURIComponent(name)}`, typeof bytes === 'string' ? new TextEncoder().encode(bytes) : new Uint8Array(bytes), { 'content-type': 'application/octet-stream' })

export const NAMES = { title: 'Control', condition: 'control', protocol: '200 ms step', manipulation: 'none' }

/** Keeps the conditions named of a file; without names the one that is called control. */
export async function keep(who: Visitor, benchId: string, bytes: Uint8Array | string, wanted: { from?: string, choices?: Record<string, unknown>, names?: Partial<typeof NAMES> } = {}): Promise<Answer<RecordingDetail[]>> {
  const { body } = await upload(who, benchId, bytes)
  return who.post<RecordingDetail[]>(`/api/benches/${benchId}/recordings`, { uploadId: body.uploadId, choices: wanted.choices ?? {}, keep: [{ ...NAMES, ...wanted.names, from: wanted.from ?? 'control' }] })
}
export async function makeRecording(who: Visitor, benchId: string): Promise<string> {
  const { status, body } = await keep(who, benchId, TABLE)
  if (status !== 201) throw new Error(`The recording was not kept: ${status} ${JSON.stringify(body)}`)
  return body[0]!.recordingId
}
export async function makeWeighUp(who: Visitor, benchId: string, recordings: string[]): Promise<string> {
  const { status, body } = await who.post<WeighUpDetail>(`/api/benches/${benchId}/weigh-ups`, { title: 'Weighed', recordings })
  if (status !== 201) throw new Error(`The weigh-up was not kept: ${status} ${JSON.stringify(body)}`)
  return body.weighUpId
}
