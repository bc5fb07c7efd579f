/** The theme a person chose: kept in a cookie, so that the server draws the page in it and nothing flashes. */
export const THEMES = ['system', 'light', 'dark'] as const
export type Theme = typeof THEMES[number]

export const useTheme = () => ({ theme: useKeptChoice<Theme>('moorage-theme', THEMES, 'system') })
