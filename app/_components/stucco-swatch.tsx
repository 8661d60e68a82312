import { ShellSection } from '@/app/_components/shell-section'
import { bandGrade } from '@/lib/trees/section'
import type { Stucco } from '@/lib/coats/vocabulary'

/** A little piece of shell with one stucco on it, 54 x 30 at the head of a run. Decoration: the word stands beside it. */
export function StuccoSwatch({ stucco, width = 54, height = 30 }: { stucco: Stucco; width?: number; height?: number }) {
  return (
    <ShellSection
      coats={[{ grade: bandGrade({ kind: stucco === 'none' ? 'seal' : 'backup', stucco }) }]}
      done={1}
      open={null}
      state="drying"
      target={0.9}
      height={height}
      width={width}
      isDecoration
    />
  )
}
