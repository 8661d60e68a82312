import { refuseField } from '@/lib/commands/refuse-field'
import { isSameName } from '@/lib/format/same-name'

type Named = { id: string | number; name: string; retiredAt: number | null }

/**
 * A name is for one place, bath or sensor, in use or retired, in whatever capitals.
 *
 * @param among every row of the kind; `ownId` is the one that is being named.
 * @throws {AppError} conflict with `fields`.
 */
export function requireFreeName(
  name: string,
  { among, kind, ownId }: { among: readonly Named[]; kind: 'place' | 'bath' | 'sensor'; ownId: string | number | null },
): void {
  const namesake = among.find((row) => row.id !== ownId && isSameName(row.name, name))
  if (!namesake) return
  refuseField(
    'name',
    namesake.retiredAt === null
      ? `There is a ${namesake.name} already.`
      : `A retired ${kind} is called ${namesake.name}. Take it into use again, or choose another name.`,
  )
}
