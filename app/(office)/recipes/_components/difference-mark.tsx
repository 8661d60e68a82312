import { DIFFERENCE_WORDS } from '@/lib/recipes/version-differences'

const SHAPES = {
  changed: 'M12 2l10 10-10 10L2 12z',
  added: 'M9.5 2h5v7.5H22v5h-7.500V22h-5v-7.500H2v-5h7.500z',
  removed: 'M2 9.5h20v5H2z',
  moved: 'M7 2l6 7H9v13H5V9H1zM17 22l-6-7h4V2h4v13h4z',
} as const

/** What became of a coat: a shape and, unless the place says it, its word. */
export function DifferenceMark({ what, words = DIFFERENCE_WORDS[what] }: { what: keyof typeof SHAPES; words?: string }) {
  return (
    <span className={`difference difference-${what}`}>
      <svg className="mark" viewBox="0 0 24 24" aria-hidden="true" focusable="false">
        <path d={SHAPES[what]} fill="currentColor" />
      </svg>
      {words}
    </span>
  )
}
