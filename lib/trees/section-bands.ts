import type { BandGrade, SectionDrawing } from '@/lib/trees/section'

/** Width of a band in 1/40 of the height. */
const BAND_UNITS: Record<BandGrade, number> = { fine: 13, medium: 17, coarse: 22, seal: 9 }
/** Least width of a band, px, so that small drawings still show every coat. */
const BAND_LEAST: Record<BandGrade, number> = { fine: 7, medium: 8.5, coarse: 11, seal: 5 }

export type SectionBands = {
  coreWidth: number
  /** Inner and outer edge of each coat's band, px from the left. */
  edges: [number, number][]
}

export type BandSize = { height: number; width?: number; fit?: number; unit?: number }

/**
 * Where every band of the drawn shell begins and ends.
 *
 * `width` stretches the bands to fill it, `fit` only squeezes those that would be wider; the wax core keeps its own width.
 * What hangs at the outer end (cap, outer line, red tag) takes its room from the bands.
 */
export function sectionBands(
  { coats, done, open, state }: SectionDrawing,
  { height, width = 0, fit = 0, unit = 0 }: BandSize,
): SectionBands {
  const u = unit || height / 40
  const bulge = height * 0.15
  const coreWidth = 20 * u
  const openIndex = open ? done : -1
  const openLeast = Math.max(34, 44 * u)
  const naturalWidth = (index: number, grade: BandGrade) =>
    index === openIndex ? openLeast : Math.max(BAND_UNITS[grade] * u, BAND_LEAST[grade])
  const natural = coats.reduce((sum, coat, index) => sum + naturalWidth(index, coat.grade), 0)
  const room = width || fit
  let squeeze = 1
  if (room && (width || coreWidth + natural + bulge + 3 > room)) {
    const cap = state === 'ready' || state === 'released' ? 6 * u : 0
    const outer = state === 'released' ? 9 * u : 0
    const hanger = state === 'held' ? height * 0.34 : 0
    squeeze = Math.max(0.05, (room - coreWidth - bulge - 3 - cap - outer - hanger) / natural)
  }
  let x = coreWidth
  const edges = coats.map((coat, index): [number, number] => {
    const inner = x
    x = inner + naturalWidth(index, coat.grade) * squeeze
    return [inner, x]
  })
  return { coreWidth, edges }
}
