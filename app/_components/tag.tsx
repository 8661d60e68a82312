import Link from 'next/link'

const HEIGHTS = { s: 26, m: 32, l: 40, xl: 60, far: 100 } as const

export type TagProps = {
  /** The tree's number as stamped: 'T-118'. */
  tag: string
  size?: keyof typeof HEIGHTS
  /** Height in px where no named size fits. */
  height?: number
  /** Red, on a twist of wire. */
  isHeld?: boolean
  /** Colour of the ground seen through the wire hole. */
  ground?: 'paper' | 'bone' | 'sunk'
  /** Makes the tag a link to its tree. Not inside a row that is itself one key. */
  isLink?: boolean
  className?: string
}

/** A tree's tag: a stamped metal ticket. */
export function Tag({ tag, size = 'm', height, isHeld = false, ground = 'paper', isLink = false, className = '' }: TagProps) {
  const style = { '--th': `${height ?? HEIGHTS[size]}px`, '--tag-hole': `var(--${ground})` }
  const classes = `tag${isHeld ? ' tag-held' : ''} ${className}`
  const ticket = isLink ? (
    <Link className={classes} style={style} href={`/trees/${encodeURIComponent(tag)}`} prefetch={false}>
      {tag}
    </Link>
  ) : (
    <span className={classes} style={style}>
      {tag}
    </span>
  )
  if (!isHeld) return ticket
  return (
    <span className="wired">
      <svg viewBox="0 0 40 34" aria-hidden="true" focusable="false">
        <path d="M4 1V6M4 6C4 24 22 30 27 20S13 8 10 22" fill="none" stroke="currentColor" strokeWidth="2.6" />
      </svg>
      {ticket}
    </span>
  )
}

/** Long numbers ('ABC-12345') in a smaller stamp, so that a column of tags keeps its width. */
export function fittedTagHeight(tag: string, height: number): number {
  if (tag.length <= 5) return height
  return tag.length <= 7 ? Math.round(height * 0.82) : Math.round(height * 0.68)
}
