'use client'

import { useSyncExternalStore } from 'react'
import { Key, type KeySize } from '@/app/_components/key'
import { parseTheme, THEME_COOKIE, THEMES, type Theme } from '@/lib/core/theme'

const YEAR_S = 31_536_000
const CHANGED = 'kilnward-theme'
const WORDS: Record<Theme, string> = { light: 'Light', dark: 'Dark', auto: 'As the device' }

function subscribe(listener: () => void): () => void {
  window.addEventListener(CHANGED, listener)
  return () => window.removeEventListener(CHANGED, listener)
}

function chooseTheme(theme: Theme): void {
  // eslint-disable-next-line unicorn/no-document-cookie -- the Cookie Store API is missing on plain http, where most tablets are
  document.cookie = `${THEME_COOKIE}=${theme}; path=/; max-age=${YEAR_S}; samesite=lax`
  document.documentElement.dataset.theme = theme
  window.dispatchEvent(new Event(CHANGED))
}

function useTheme(): Theme | null {
  return useSyncExternalStore<Theme | null>(
    subscribe,
    () => parseTheme(document.documentElement.dataset.theme),
    () => null,
  )
}

/** Three keys: light, dark, as the device. */
export function ThemeSwitch({ size = 44, className = '' }: { size?: KeySize; className?: string }) {
  const theme = useTheme()
  return (
    <fieldset className={`flex flex-wrap gap-2 ${className}`}>
      <legend className="vh">Colour scheme</legend>
      {THEMES.map((choice) => (
        <Key key={choice} size={size} isChosen={theme === choice} onPress={() => chooseTheme(choice)}>
          {WORDS[choice]}
        </Key>
      ))}
    </fieldset>
  )
}

/** The same as one small key that goes round: for a bar with little room. */
export function ThemeKey() {
  const theme = useTheme() ?? 'auto'
  const next = THEMES[(THEMES.indexOf(theme) + 1) % THEMES.length] ?? 'auto'
  return (
    <Key
      tone="quiet"
      icon="scheme"
      className="px-3"
      onPress={() => chooseTheme(next)}
      aria-label={`Colour scheme: ${WORDS[theme]}. Change to ${WORDS[next]}`}
    >
      {WORDS[theme]}
    </Key>
  )
}
