/** Reading and replacing one value inside a document by its dotted path, without touching the rest. */

/** The value at a path, or undefined. */
export function valueAt(document: unknown, path: string): unknown {
  return path.split('.').reduce<unknown>((node, key) => (node as Record<string, unknown> | null | undefined)?.[key], document)
}

/** A copy of the document with one value replaced; only the objects on the way are copied. */
export function withValue<T>(document: T, path: string, value: unknown): T {
  const [key, ...rest] = path.split('.')
  const copy = (Array.isArray(document) ? [...document] : { ...document }) as Record<string, unknown>
  copy[key!] = rest.length === 0 ? value : withValue(copy[key!], rest.join('.'), value)
  return copy as T
}
