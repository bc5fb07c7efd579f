/** What this device keeps of a person's taste: how decimals are shown, and whether single keys act. */
export type DecimalSign = 'point' | 'comma'

export const usePreferencesStore = defineStore('preferences', () => {
  const options = { maxAge: 31_536_000, sameSite: 'lax', path: '/' } as const
  const decimal = useCookie<DecimalSign>('moorage-decimal', { default: () => 'point', ...options })
  /** Single-letter keys can be switched off (WCAG 2.1.4). */
  const singleKeys = useCookie<'on' | 'off'>('moorage-keys', { default: () => 'on', ...options })
  return { decimal, singleKeys }
})
