import type { TempUnit } from '@/lib/format/units'
import type { Warning } from '@/lib/queue/contract'

/** The sentence of a warning for somebody who reads temperatures in this unit. */
export function warningText({ text, textInDegF }: Pick<Warning, 'text' | 'textInDegF'>, unit: TempUnit): string {
  return unit === 'degF' ? (textInDegF ?? text) : text
}
