import { treeTag } from '@/lib/trees/tree-input'

/**
 * A tag as it stands in an address, small letters and encoding included; null for what cannot be a tag.
 *
 * @example readTag('t-122') // => 'T-122'
 */
export function readTag(segment: string): string | null {
  let text: string
  try {
    text = decodeURIComponent(segment)
  } catch {
    return null
  }
  const parsed = treeTag.safeParse(text.toUpperCase())
  return parsed.success ? parsed.data : null
}
