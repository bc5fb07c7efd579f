/** Canonical JSON text (RFC 8785): one spelling of a document, so that a digest means the document and not its layout. */
import canonicalize from 'canonicalize'

/**
 * What RFC 8785 (I-JSON) cannot carry is refused here with its path: the serialiser underneath would drop
 * `undefined` in arrays to null and let lone surrogates through.
 */
function refuseUncarried(value: unknown, path: string): void {
  if (typeof value === 'number') {
    if (!Number.isFinite(value)) throw new TypeError(`canonicalText: ${path || 'the value'} is ${value}; only finite numbers have a canonical form`)
  } else if (typeof value === 'string') {
    if (LONE_SURROGATE.test(value)) throw new TypeError(`canonicalText: ${path || 'the value'} holds half of a surrogate pair`)
  } else if (Array.isArray(value)) {
    // A row of a thousand counts is common: plain numbers are checked without building a path for each.
    for (let i = 0; i < value.length; i++) {
      const item: unknown = value[i]
      if (typeof item !== 'number' || !Number.isFinite(item)) refuseUncarried(item, `${path}[${i}]`)
    }
  } else if (value !== null && typeof value === 'object') {
    for (const [key, item] of Object.entries(value)) {
      if (LONE_SURROGATE.test(key)) throw new TypeError(`canonicalText: a key of ${path || 'the value'} holds half of a surrogate pair`)
      if (item !== undefined) refuseUncarried(item, path ? `${path}.${key}` : key)
    }
  } else if (typeof value !== 'boolean' && value !== null) {
    throw new TypeError(`canonicalText: ${path || 'the value'} is of type ${typeof value}`)
  }
}
const LONE_SURROGATE = /\p{Surrogate}/u

/** RFC 8785 text of a JSON value. Keys whose value is `undefined` are left out. Throws TypeError on what JSON cannot carry. */
export function canonicalText(value: unknown): string {
  refuseUncarried(value, '')
  return canonicalize(value)!
}
