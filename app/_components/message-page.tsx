import type { ReactNode } from 'react'
import { ShellSection } from '@/app/_components/shell-section'
import type { BandGrade, SectionState } from '@/lib/trees/section'

const RECIPE: BandGrade[] = ['fine', 'fine', 'medium', 'medium', 'coarse', 'coarse', 'coarse', 'seal']

/** A page that says one thing and offers one or two keys: not found, broken. */
export function MessagePage({
  title,
  children,
  keys,
  state,
  done,
}: {
  title: string
  children: ReactNode
  keys: ReactNode
  state: SectionState
  done: number
}) {
  return (
    <main className="mx-auto flex min-h-dvh max-w-[760px] flex-col justify-center gap-6 px-6 py-8">
      <ShellSection
        coats={RECIPE.map((grade) => ({ grade }))}
        done={done}
        open={null}
        state={state}
        target={0.9}
        height={72}
        width={520}
        className="h-auto max-w-full"
        isDecoration
      />
      <h1 className="text-44">{title}</h1>
      <div className="max-w-[54ch] text-20">{children}</div>
      <div className="flex flex-wrap gap-3">{keys}</div>
    </main>
  )
}
