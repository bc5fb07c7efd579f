/** Times as a person says them: today and yesterday by name, this year without the year. Local time of the reader's machine. */
const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec']
const two = (part: number) => String(part).padStart(2, '0')
const dayOf = (at: Date) => Math.round(Date.UTC(at.getFullYear(), at.getMonth(), at.getDate()) / 86_400_000)

/** `14:02` */
export const clockOf = (at: Date) => `${two(at.getHours())}:${two(at.getMinutes())}`

/** `today, 08:31` · `yesterday, 17:40` · `30 Nov, 23:52` · `30 Nov 2025, 23:52` */
export function whenOf(iso: string, now = new Date()): string {
  const at = new Date(iso)
  if (Number.isNaN(at.getTime())) return iso
  const days = dayOf(now) - dayOf(at)
  const day = days === 0 ? 'today' : days === 1 ? 'yesterday' : dateOf(iso, now)
  return `${day}, ${clockOf(at)}`
}

/** `30 Nov`, with the year when it is another one */
export function dateOf(iso: string, now = new Date()): string {
  const at = new Date(iso)
  return `${at.getDate()} ${MONTHS[at.getMonth()]}${at.getFullYear() === now.getFullYear() ? '' : ` ${at.getFullYear()}`}`
}
