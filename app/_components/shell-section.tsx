import { memo, useId, type ReactNode } from 'react'
import { describeSection, type BandGrade, type SectionDrawing } from '@/lib/trees/section'
import { sectionBands } from '@/lib/trees/section-bands'

/** Stucco: pitch and radius in units, least pitch and least radius in px. */
const GRAIN: Record<Exclude<BandGrade, 'seal'>, { pitch: number; radius: number; leastPitch: number; leastRadius: number }> = {
  fine: { pitch: 3.9, radius: 0.95, leastPitch: 2.5, leastRadius: 0.62 },
  medium: { pitch: 6.0, radius: 1.5, leastPitch: 3.7, leastRadius: 0.95 },
  coarse: { pitch: 9.6, radius: 2.7, leastPitch: 6.2, leastRadius: 1.75 },
}

const round = (value: number): string => (Math.round(value * 100) / 100).toString()

/** Seeded so that server and browser, today and tomorrow, scatter the same grains. */
function grainRandom(seed: number): () => number {
  let state = (seed * 2654435761) >>> 0 || 1
  return () => {
    state = (state ^ (state << 13)) >>> 0
    state = (state ^ (state >>> 17)) >>> 0
    state = (state ^ (state << 5)) >>> 0
    return state / 4294967296
  }
}

export type ShellSectionProps = SectionDrawing & {
  /** Height of the strip, px: 20 table, 20-28 floor row, 40 sheet, 80 phone, 160 tree page. */
  height?: number
  /** Stretches the bands to this width; the core keeps its own. */
  width?: number
  /** Squeezes the bands when they would be wider than this. */
  fit?: number
  /** Height that one unit is a fortieth of, when it is not the height itself. */
  unit?: number
  /** Black only, for labels and photocopies. */
  isMono?: boolean
  /** Beside a row that already says it the drawing is decoration. */
  isDecoration?: boolean
  label?: string
  className?: string
}

/**
 * The shell section: wax on the left, one band per coat outward, the open band drying from the wax side,
 * the coats to come in dashes. Band width and texture follow the stucco.
 */
export const ShellSection = memo(function ShellSection({
  coats,
  done,
  open,
  state,
  target,
  height: h = 40,
  width = 0,
  fit: fitWidth = 0,
  unit = 0,
  isMono = false,
  isDecoration = false,
  label,
  className = '',
}: ShellSectionProps) {
  // React's ids may hold characters that url(#…) does not take.
  const id = `ss${useId().replace(/[^\w-]/g, '')}`
  const u = unit || h / 40
  const bulge = h * 0.15
  const top = Math.max(4, h * 0.16)
  const openIndex = open ? done : -1
  const { coreWidth, edges } = sectionBands({ coats, done, open, state, target }, { height: h, width, fit: fitWidth, unit })
  const y0 = top
  const y1 = top + h
  const middle = (y0 + y1) / 2
  const bow = bulge * 2
  const bowAt = (y: number) => {
    const t = (y - y0) / h
    return bow * 2 * t * (1 - t)
  }
  const arc = (x: number) => `M${round(x)} ${round(y0)}Q${round(x + bow)} ${round(middle)} ${round(x)} ${round(y1)}`
  const band = (a: number, b: number) =>
    `M${round(a)} ${round(y0)}Q${round(a + bow)} ${round(middle)} ${round(a)} ${round(y1)}H${round(b)}Q${round(b + bow)} ${round(middle)} ${round(b)} ${round(y0)}Z`
  const line = Math.max(1, 1.25 * u)
  const drawn: ReactNode[] = []
  const draw = (key: string, node: ReactNode) => drawn.push(<g key={key}>{node}</g>)

  const grains = (grade: BandGrade, a: number, b: number, index: number, kind: string): ReactNode => {
    if (grade === 'seal') return null
    const { pitch, radius, leastPitch, leastRadius } = GRAIN[grade]
    const r = Math.min(Math.max(radius * u, leastRadius), (b - a) * 0.32)
    const p = Math.max(pitch * u, leastPitch)
    const random = grainRandom(97 + index * 13 + done)
    const pad = r + line * 0.9
    const columns = Math.max(1, Math.round((b - a - pad * 2) / p) + 1)
    const rows = Math.max(2, Math.floor((h - pad * 2) / (p * 0.94)) + 1)
    const jitter = h >= 30 ? 0.2 : 0.06
    // Coarse grains are angular, not round, where that can be seen.
    const isAngular = grade === 'coarse' && h >= 30
    let d = ''
    for (let column = 0; column < columns; column += 1) {
      for (let row = 0; row < rows; row += 1) {
        if (column % 2 && row === rows - 1) continue
        const offset = (column % 2) * 0.5
        const y = y0 + pad + (h - pad * 2) * ((row + offset) / Math.max(1, rows - 1)) + (random() - 0.5) * p * jitter
        const x =
          (columns === 1 ? (a + b) / 2 : a + pad + ((b - a - pad * 2) * column) / (columns - 1)) + bowAt(y) + (random() - 0.5) * p * jitter
        if (isAngular) {
          const start = random() * 6.28
          const corners: string[] = []
          for (let corner = 0; corner < 5; corner += 1) {
            const reach = r * (0.86 + random() * 0.34)
            const angle = start + (corner * 6.283) / 5
            corners.push(`${round(x + reach * Math.cos(angle))} ${round(y + reach * Math.sin(angle))}`)
          }
          d += `M${corners.join('L')}Z`
        } else {
          d += `M${round(x)} ${round(y)}h0`
        }
      }
    }
    // A line of no length with round ends is a dot in a fifth of the letters: a floor shows thousands of them.
    return isAngular ? <path className={kind} d={d} /> : <path className={`${kind} ss-dots`} d={d} strokeWidth={round(r * 2)} />
  }

  // Core: solid wax, cut flat on the left.
  draw(
    'core',
    <path
      className="ss-core"
      d={`M0 ${round(y0)}H${round(coreWidth)}Q${round(coreWidth + bow)} ${round(middle)} ${round(coreWidth)} ${round(y1)}H0Z`}
    />,
  )
  if (h >= 64) {
    for (let i = 1; i <= 3; i += 1) {
      const x = (coreWidth * i) / 4
      draw(
        `core-${i}`,
        <path
          className="ss-coreline"
          d={`M${round(x)} ${round(y0 + 2)}Q${round(x + (bow * i) / 4)} ${round(middle)} ${round(x)} ${round(y1 - 2)}`}
          strokeWidth={round(u)}
        />,
      )
    }
  }

  let x = edges.at(-1)?.[1] ?? coreWidth
  const edge = (index: number): [number, number] => edges[index] ?? [coreWidth, coreWidth]

  coats.forEach((coat, index) => {
    const [a, b] = edge(index)
    if (index < done) {
      draw(
        `coat-${index}`,
        <>
          <path className="ss-dry" d={band(a, b)} />
          {grains(coat.grade, a, b, index, 'ss-grain')}
          <path className="ss-line" d={arc(b)} strokeWidth={round(line)} />
        </>,
      )
    } else if (index === openIndex && open && state === 'unknown') {
      // Nobody knows how dry it is: an empty band with a broken edge, no front and no notch.
      const size = Math.max(4, h * 0.2)
      const cx = (a + b) / 2 + bow / 2
      draw(
        `coat-${index}`,
        <>
          <path
            className="ss-unknown"
            d={band(a, b)}
            strokeWidth={round(Math.max(1.2, 1.6 * u))}
            strokeDasharray={`${round(3.2 * u + 1)} ${round(2.6 * u + 1)}`}
          />
          <path
            className="ss-ask"
            d={`M${round(cx - size * 0.6)} ${round(middle - size * 0.5)}q0 ${round(-size * 0.7)} ${round(size * 0.65)} ${round(-size * 0.7)}t${round(size * 0.6)} ${round(size * 0.65)}c0 ${round(size * 0.5)} ${round(-size * 0.6)} ${round(size * 0.5)} ${round(-size * 0.6)} ${round(size * 1.05)}m0 ${round(size * 0.45)}v${round(size * 0.28)}`}
            strokeWidth={round(Math.max(1.4, 2 * u))}
          />
        </>,
      )
    } else if (index === openIndex && open) {
      const at = a + (b - a) * target
      // While a coat is short of its target a sliver of water stays visible, and its front stays inside the notch.
      const least = open.dry < target ? Math.max(5, 6 * u) : 0
      const front = Math.max(a, Math.min(a + (b - a) * Math.min(1, Math.max(0, open.dry)), b - least))
      const slanted = state === 'nearly'
      const step = Math.max(3, 5 * u)
      let hatch = ''
      if (slanted) {
        for (let q = -h; q < b - front + bow; q += step * 1.15) hatch += `M${round(front + q)} ${round(y1)}l${round(h)} ${round(-h)}`
      } else {
        for (let y = y0 + step * 0.7; y < y1; y += step) hatch += `M${round(front)} ${round(y)}H${round(b + bow)}`
      }
      const notch = Math.max(4, Math.min(h, u * 40) * 0.15)
      draw(
        `coat-${index}`,
        <>
          <clipPath id={`${id}d`}>
            <path d={band(a - line, front)} />
          </clipPath>
          <clipPath id={`${id}w`}>
            <path d={band(front, b)} />
          </clipPath>
          {front > a && <path className="ss-dry" d={band(a, front)} />}
          {front < b && (
            <>
              <path className={slanted ? 'ss-near' : 'ss-wet'} d={band(front, b)} />
              <path className="ss-hatch" clipPath={`url(#${id}w)`} d={hatch} strokeWidth={round(Math.max(0.9, 1.1 * u))} />
            </>
          )}
          <g clipPath={`url(#${id}d)`}>{grains(coat.grade, a, b, index, 'ss-grain')}</g>
          {h >= 30 && <g clipPath={`url(#${id}w)`}>{grains(coat.grade, a, b, index, 'ss-grain-wet')}</g>}
          {front > a + 1 && <path className="ss-front" d={arc(front)} strokeWidth={round(Math.max(1.5, 2.2 * u))} />}
          <path className="ss-line" d={arc(b)} strokeWidth={round(line * 1.5)} />
          <path
            className="ss-target"
            d={arc(at)}
            strokeWidth={round(Math.max(1, 1.2 * u))}
            strokeDasharray={`${round(2.4 * u + 0.6)} ${round(2 * u + 0.6)}`}
          />
          <path
            className="ss-notch"
            d={`M${round(at - notch * 0.8)} ${round(y0 - notch + 1)}H${round(at + notch * 0.8)}L${round(at)} ${round(y0 + notch * 0.35)}Z`}
          />
        </>,
      )
    }
  })

  const first = done + (open ? 1 : 0)
  const isToDip = state === 'dry' || state === 'waiting' || state === 'overdue' || state === 'waxready'
  coats.forEach((coat, index) => {
    if (index < first) return
    const [a, b] = edge(index)
    if (isToDip && index === first) {
      const isOver = state === 'overdue'
      const notch = Math.max(4, h * 0.15)
      const cx = (a + b) / 2
      draw(
        `coat-${index}`,
        <>
          <path className={isOver ? 'ss-next over' : 'ss-next'} d={band(a, b)} strokeWidth={round(Math.max(1.6, 2.4 * u))} />
          {grains(coat.grade, a, b, index, isOver ? 'ss-grain-over' : 'ss-grain-next')}
          {isOver ? (
            <path
              className="ss-over"
              d={`M${round(cx - notch * 1.75)} ${round(y0 - notch + 0.6)}h${round(notch * 1.6)}l${round(-notch * 0.8)} ${round(notch * 1.2)}zM${round(cx + notch * 0.15)} ${round(y0 - notch + 0.6)}h${round(notch * 1.6)}l${round(-notch * 0.8)} ${round(notch * 1.2)}z`}
            />
          ) : state === 'waiting' ? (
            <path
              className="ss-wait"
              strokeWidth={round(Math.max(1.3, notch * 0.3))}
              d={`M${round(cx - notch * 0.82)} ${round(y0 - notch + 1)}H${round(cx + notch * 0.82)}L${round(cx)} ${round(y0 + notch * 0.1)}Z`}
            />
          ) : (
            <path
              className="ss-go"
              d={`M${round(cx - notch)} ${round(y0 - notch + 0.6)}H${round(cx + notch)}L${round(cx)} ${round(y0 + notch * 0.3)}Z`}
            />
          )}
        </>,
      )
    } else {
      const isClosed = index === first || (isToDip && index === first + 1)
      draw(
        `coat-${index}`,
        <>
          <path
            className="ss-todo"
            d={
              isClosed
                ? band(a, b)
                : `M${round(a)} ${round(y0)}H${round(b)}Q${round(b + bow)} ${round(middle)} ${round(b)} ${round(y1)}H${round(a)}`
            }
            strokeWidth={round(Math.max(0.9, u * 1.1))}
            strokeDasharray={`${round(Math.max(2.2, 3.2 * u))} ${round(Math.max(1.8, 2.4 * u))}`}
          />
          {h >= 36 && grains(coat.grade, a, b, index, 'ss-grain-todo')}
        </>,
      )
    }
  })

  // Outer skin of what exists.
  const lastX = first ? edge(first - 1)[1] : coreWidth
  draw(
    'skin',
    <>
      <path className="ss-skin" d={`M0 ${round(y0)}H${round(lastX)}M0 ${round(y1)}H${round(lastX)}`} strokeWidth={round(line)} />
      <path className="ss-skin" d={`M0 ${round(y0)}V${round(y1)}`} strokeWidth={round(line)} />
    </>,
  )
  coats.forEach((coat, index) => {
    if (!coat.hasPatch || index >= first) return
    const [a, b] = edge(index)
    const size = Math.max(5, h * 0.2)
    const px = (a + b) / 2 + bowAt(y1 - size * 0.9)
    draw(
      `patch-${index}`,
      <>
        <path
          className="ss-patch"
          d={`M${round(px - size * 0.8)} ${round(y1 - size * 1.15)}h${round(size * 1.6)}v${round(size * 1.15)}h${round(-size * 1.6)}z`}
          strokeWidth={round(Math.max(1.1, 1.5 * u))}
        />
        <path
          className="ss-stitch"
          d={`M${round(px - size * 0.42)} ${round(y1 - size * 0.9)}l${round(size * 0.84)} ${round(size * 0.66)}m0 ${round(-size * 0.66)}l${round(-size * 0.84)} ${round(size * 0.66)}`}
          strokeWidth={round(Math.max(1, 1.2 * u))}
        />
      </>,
    )
  })

  if (state === 'held') {
    const step = Math.max(4, 6.5 * u)
    let hatch = ''
    for (let q = -h; q < lastX + bow; q += step) hatch += `M${round(q)} ${round(y1)}l${round(h)} ${round(-h)}`
    const tagWidth = Math.max(8, h * 0.3)
    const tagHeight = Math.max(10, h * 0.46)
    const tx = lastX + bulge + Math.max(2, h * 0.1)
    const ty = y0 + h * 0.36
    const hx = tx + tagWidth / 2
    const hole = Math.max(1.1, tagWidth * 0.13)
    draw(
      'held',
      <>
        <clipPath id={`${id}h`}>
          <path d={`M0 ${round(y0)}H${round(lastX)}Q${round(lastX + bow)} ${round(middle)} ${round(lastX)} ${round(y1)}H0Z`} />
        </clipPath>
        <path className="ss-held" clipPath={`url(#${id}h)`} d={hatch} strokeWidth={round(Math.max(1.3, 1.9 * u))} />
        <path
          className="ss-wire"
          strokeWidth={round(Math.max(1.1, 1.3 * u))}
          d={`M${round(lastX)} ${round(y0)}C${round(lastX + tagWidth * 0.2)} ${round(y0 - top * 0.9)} ${round(hx)} ${round(y0 - top * 0.6)} ${round(hx)} ${round(ty + hole * 2.4)}`}
        />
        <path
          className="ss-redtag"
          d={`M${round(tx + tagWidth * 0.26)} ${round(ty)}H${round(tx + tagWidth * 0.74)}L${round(tx + tagWidth)} ${round(ty + tagHeight * 0.22)}V${round(ty + tagHeight)}H${round(tx)}V${round(ty + tagHeight * 0.22)}Z`}
        />
        <circle className="ss-hole" cx={round(hx)} cy={round(ty + hole * 2.4)} r={round(hole)} />
      </>,
    )
    x = Math.max(x, tx + tagWidth - bulge + 1)
  }
  if (state === 'scrapped') {
    // Struck through, twice: the shell stays to be read, and it is plain that nothing will come of it.
    draw(
      'scrapped',
      <path
        className="ss-scrap"
        strokeWidth={round(Math.max(2, 3 * u))}
        d={`M0 ${round(y0 + h * 0.38)}H${round(lastX + bulge)}M0 ${round(y0 + h * 0.64)}H${round(lastX + bulge)}`}
      />,
    )
  }
  if (state === 'ready' || state === 'released') {
    const capWidth = Math.max(4, 6 * u)
    draw('cap', <path className="ss-cap" d={band(lastX, lastX + capWidth)} />)
    x += capWidth
  }
  if (state === 'released') {
    const space = Math.max(5, 7 * u)
    const gap = Math.max(2, 3 * u)
    draw(
      'released',
      <path className="ss-rel" strokeWidth={round(Math.max(1.8, 2.6 * u))} d={arc(lastX + Math.max(4, 6 * u) + gap + Math.max(1, u))} />,
    )
    x += gap + space * 0.6
  }

  const outerWidth = width || Math.ceil(x + bulge + Math.max(2, 3 * u))
  const outerHeight = Math.ceil(y1 + 1)
  const drawing = { coats, done, open, state, target }
  const forEars = isDecoration ? ({ 'aria-hidden': true } as const) : { role: 'img', 'aria-label': label ?? describeSection(drawing) }
  return (
    <svg
      className={`ss${isMono ? ' ss-mono' : ''} ${className}`}
      viewBox={`0 0 ${outerWidth} ${outerHeight}`}
      width={outerWidth}
      height={outerHeight}
      {...forEars}
    >
      {drawn}
    </svg>
  )
}, isSameDrawing)

/** The queue comes anew every few seconds with equal content: compare by what is drawn, not by reference. */
function isSameDrawing(before: ShellSectionProps, after: ShellSectionProps): boolean {
  return JSON.stringify(before) === JSON.stringify(after)
}
