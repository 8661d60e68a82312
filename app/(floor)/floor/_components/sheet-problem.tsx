import { Icon } from '@/app/_components/icons'

/** What keeps a sheet from being done, in plain words; read out at once. */
export function SheetProblem({ title, detail }: { title: string; detail?: string | undefined }) {
  return (
    <div className="sheet-problem" role="alert">
      <Icon name="warning" />
      <div>
        {title}
        {detail && <small>{detail}</small>}
      </div>
    </div>
  )
}
