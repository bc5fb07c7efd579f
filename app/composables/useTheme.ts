/** The theme a person chose: kept in a cookie, so that the server draws the page in it and nothing flashes. */
export const THEMES = ['system', 'light', 'dark'] as const
export type Theme = typeof THEMES[number]

const YEAR_SECONDS = 31_536_000

export function useTheme() {
  const kept = useCookie<Theme>('moorage-theme', { default: () => 'system', maxAge: YEAR_SECONDS, sameSite: 'lax', path: '/' })
  const theme = computed<Theme>({
    get: () => THEMES.includes(kept.value) ? kept.value : 'system',
    set: (chosen) => { kept.value = chosen },
  })
  return { theme }
}
