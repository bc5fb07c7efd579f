/** Text that people type: trimmed, one spelling (NFC), without control and bidirectional override characters. */
// eslint-disable-next-line no-control-regex
const HARMFUL = /[\u0000-\u0008\u000B\u000C\u000E-\u001F\u007F-\u009F\u200E\u200F\u202A-\u202E\u2066-\u2069\uFEFF]/g

/** What is kept of a name or title: harmful characters out, NFC, white space trimmed. Markup stays as text. */
export function neutraliseText(text: string): string {
  return text.replace(HARMFUL, '').normalize('NFC').trim()
}

/** First letter in capital, the rest as it is. */
export const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)
