import type { Spot } from '@/lib/coats/vocabulary'
import type { EvidenceFacts, Word } from '@/lib/trees/facts'

/**
 * The newest word on a coat that speaks for the whole tree: a touch or a colour at the spot that dries last. Null where nobody has said
 * anything of that spot.
 */
export function wordOf(evidence: readonly EvidenceFacts[], slowest: Spot): Word | null {
  const words = evidence.flatMap(({ kind, spot, verdict, by, takenAt }): Word[] =>
    (kind === 'touch' || kind === 'colour') && verdict !== null && spot === slowest ? [{ verdict, kind, spot, by, at: takenAt }] : [],
  )
  return words.at(-1) ?? null
}

/**
 * Who said what, as the start of a sentence.
 *
 * @example saidWords({ by: 'Maud', kind: 'touch', spot: 'core', verdict: 'dry', at }) // => 'Maud felt the core: dry'
 */
export function saidWords({ by, kind, spot, verdict }: Word): string {
  return kind === 'touch' ? `${by} felt the ${spot}: ${verdict}` : `${by} saw the colour of the ${spot}: ${verdict}`
}
