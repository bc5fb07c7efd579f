/** Keyset cursors: the last row's sort value and id, sealed in base64url. A page never shifts when rows are added. */
import { badField } from '../utils/problem'

export const writeCursor = (value: string, id: string): string => Buffer.from(JSON.stringify([value, id])).toString('base64url')

export function readCursor(cursor: string): { value: string, id: string } | null {
  if (!cursor) return null
  try {
    const [value, id] = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8')) as unknown[]
    if (typeof value === 'string' && !value.includes('\u0000') && typeof id === 'string' && /^[0-9a-f-]{36}$/.test(id)) return { value, id }
  } catch {
    // Falls through to the one answer for every cursor that was not ours.
  }
  throw badField('cursor', 'This is not a cursor from an earlier answer.')
}
/** A time from a cursor; PostgreSQL would answer a fault of its own to anything else. */
export function cursorTime(value: string): Date {
  const time = new Date(value)
  if (Number.isNaN(time.getTime())) throw badField('cursor', 'This is not a cursor from an earlier answer.')
  return time
}
