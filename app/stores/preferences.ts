/** What this device keeps of a person's taste: how decimals are shown, and whether single keys act. */
export type DecimalSign = 'point' | 'comma'

export const usePreferencesStore = defineStore('preferences', () => {
  const decimal = useKeptChoice<DecimalSign>('moorage-decimal', ['point', 'comma'], 'point')
  /** Single-letter keys can be switched off (WCAG 2.1.4). */
  const singleKeys = useKeptChoice('moorage-keys', ['on', 'off'], 'on')
  return { decimal, singleKeys }
})
