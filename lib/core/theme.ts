/** Colour scheme of a device: kept in a cookie, so that the server draws the first frame right. */
export const THEMES = ['light', 'dark', 'auto'] as const
export type Theme = (typeof THEMES)[number]

export const THEME_COOKIE = 'theme'

export function parseTheme(value: string | undefined): Theme {
  return THEMES.find((theme) => theme === value) ?? 'auto'
}
