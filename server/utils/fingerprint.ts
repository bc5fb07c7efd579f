/** Tells a retry from another request under the same key. */
import { createHash } from 'node:crypto'

export const fingerprintOf = (raw: Buffer): string => createHash('sha256').update(raw).digest('hex')
