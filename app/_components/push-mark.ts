import type { PushScope } from '@/lib/notices/push-contract'

// Apart from the rest of push: every page looks for the mark, few find one, and only those need the rest.

/** Remembers whose notices this browser shows and which, so that a subscription the browser has changed can be handed in again. */
const MARK = 'kilnward-push'

type Mark = { memberId: string; scope: PushScope }

const isMark = (value: unknown): value is Mark =>
  typeof value === 'object' &&
  value !== null &&
  'memberId' in value &&
  typeof value.memberId === 'string' &&
  'scope' in value &&
  (value.scope === 'every tree' || value.scope === 'watched trees')

function readMark(): Mark | null {
  try {
    const value: unknown = JSON.parse(window.localStorage.getItem(MARK) ?? 'null')
    return isMark(value) ? value : null
  } catch {
    return null
  }
}

export function setMark(mark: Mark): void {
  window.localStorage.setItem(MARK, JSON.stringify(mark))
}

export function clearMark(): void {
  window.localStorage.removeItem(MARK)
}

/** What this browser was set to for this member; null where it was never turned on, or for somebody else. */
export function rememberedScope(memberId: string): PushScope | null {
  const known = readMark()
  return known?.memberId === memberId ? known.scope : null
}

/** True where notices were turned on in this browser: only then is there anything to compare. */
export const hasMark = (): boolean => readMark() !== null
