/** What a file is by its first bytes, whatever its name says: only separated text can be read. */

interface Signature { bytes: number[], at?: number, name: string, cure: string }
const SHEET = 'In the spreadsheet, choose “save as” and CSV, and drop that file.'
const TABLE = 'Save the numbers as CSV, and drop that file.'
const EXPORT = 'Export the numbers from the recording program as CSV or text, and drop that file.'

/** Published signatures of the containers that people drop in place of a CSV (common practice, no source). */
const SIGNATURES: Signature[] = [
  { bytes: [0x50, 0x4B, 0x03, 0x04], name: 'a zip container, as spreadsheets (.xlsx, .ods) are', cure: SHEET },
  { bytes: [0x50, 0x4B, 0x05, 0x06], name: 'an empty zip container', cure: SHEET },
  { bytes: [0xD0, 0xCF, 0x11, 0xE0], name: 'an old spreadsheet or text document (.xls, .doc)', cure: SHEET },
  { bytes: [0x25, 0x50, 0x44, 0x46], name: 'a PDF', cure: TABLE },
  { bytes: [0x89, 0x50, 0x4E, 0x47], name: 'a PNG picture', cure: TABLE },
  { bytes: [0xFF, 0xD8, 0xFF], name: 'a JPEG picture', cure: TABLE },
  { bytes: [0x47, 0x49, 0x46, 0x38], name: 'a GIF picture', cure: TABLE },
  { bytes: [0x49, 0x49, 0x2A, 0x00], name: 'a TIFF picture', cure: TABLE },
  { bytes: [0x4D, 0x4D, 0x00, 0x2A], name: 'a TIFF picture', cure: TABLE },
  { bytes: [0x57, 0x45, 0x42, 0x50], at: 8, name: 'a WebP picture', cure: TABLE },
  { bytes: [0x89, 0x48, 0x44, 0x46], name: 'an HDF5 container', cure: EXPORT },
  { bytes: [0x1F, 0x8B], name: 'a gzip archive', cure: 'Unpack it, and drop the CSV inside.' },
  { bytes: [0x37, 0x7A, 0xBC, 0xAF], name: 'a 7z archive', cure: 'Unpack it, and drop the CSV inside.' },
  { bytes: [0x52, 0x61, 0x72, 0x21], name: 'a RAR archive', cure: 'Unpack it, and drop the CSV inside.' },
  { bytes: [0x41, 0x42, 0x46, 0x20], name: 'a binary recording', cure: EXPORT },
  { bytes: [0x41, 0x42, 0x46, 0x32], name: 'a binary recording', cure: EXPORT },
]
/** Bytes that are looked at for zeros and control characters [bytes]. */
const LOOKED_AT = 4096

const starts = (bytes: Uint8Array, { bytes: wanted, at = 0 }: Signature) => wanted.every((byte, i) => bytes[at + i] === byte)

/** Share of zero bytes at even or at odd places: plain text in UTF-16 has nearly all of one and none of the other [1]. */
function zeroShare(bytes: Uint8Array, parity: 0 | 1): number {
  const end = Math.min(bytes.length, LOOKED_AT)
  let zeros = 0, seen = 0
  for (let i = parity; i < end; i += 2, seen++) if (bytes[i] === 0) zeros++
  return seen === 0 ? 0 : zeros / seen
}

/** UTF-16 that came without a byte order mark, by its zero bytes; null where it is something else. */
export function bareUtf16(bytes: Uint8Array): 'utf-16le' | 'utf-16be' | null {
  if (bytes.length < 4 || bytes.length % 2 !== 0) return null
  const even = zeroShare(bytes, 0), odd = zeroShare(bytes, 1)
  if (odd > 0.7 && even < 0.1) return 'utf-16le'
  return even > 0.7 && odd < 0.1 ? 'utf-16be' : null
}

/**
 * Why a file cannot be separated text, judged by its content.
 * @param bytes - the file, or its first few thousand bytes
 * @returns a whole sentence with the cure, or null where it may be text
 */
export function foreignContent(bytes: Uint8Array): string | null {
  const known = SIGNATURES.find(one => starts(bytes, one))
  if (known) return `By its content this file is ${known.name}. ${known.cure}`
  const marked = (bytes[0] === 0xFF && bytes[1] === 0xFE) || (bytes[0] === 0xFE && bytes[1] === 0xFF)
  const head = bytes.subarray(0, LOOKED_AT)
  if (!marked && !bareUtf16(bytes) && head.includes(0)) return `By its content this file is binary, not text. ${EXPORT}`
  const opening = String.fromCharCode(...head.subarray(0, 200)).replace(/^\u00EF\u00BB\u00BF/, '').trimStart().toLowerCase()
  if (/^(?:<!doctype html|<html|<table)/.test(opening)) return `By its content this file is a web page. ${SHEET}`
  if (/^(?:<\?xml|\{\\rtf)/.test(opening)) return `By its content this file is ${opening.startsWith('<') ? 'XML' : 'a formatted text document'}. ${SHEET}`
  return null
}
