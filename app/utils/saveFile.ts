/** Hands a file to the person: the browser's own way of saving. */
export function saveFile(name: string, content: BlobPart, type: string): void {
  const address = URL.createObjectURL(new Blob([content], { type }))
  const link = document.createElement('a')
  link.href = address
  link.download = name
  document.body.append(link)
  link.click()
  link.remove()
  setTimeout(() => URL.revokeObjectURL(address), 10_000)
}

/** A file name from free text: letters, digits and hyphens. */
export function fileName(...parts: (string | number)[]): string {
  return parts.map(part => String(part).normalize('NFKD').replace(/[^\p{L}\p{N}]+/gu, '-').replace(/^-+|-+$/g, '').toLowerCase()).filter(Boolean).join('-').slice(0, 120) || 'moorage'
}
