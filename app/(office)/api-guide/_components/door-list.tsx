import { rolesFor } from '@/lib/members/roles'
import { DESCRIBED_DOORS } from '@/lib/server/doors/all'
import type { DoorDescription } from '@/lib/server/doors/door'
import { openApiDocument } from '@/lib/server/open-api'

/** Every door, from the same document that programs read. */
export function DoorList({ address }: { address: string }) {
  const { paths, tags } = openApiDocument(DESCRIBED_DOORS, { address })
  const whoOf = new Map(DESCRIBED_DOORS.map((door) => [door.operationId, door.who]))
  const operations = Object.entries(paths).flatMap(([path, methods]) =>
    Object.entries(methods).map(([method, operation]) => ({ path, method: method.toUpperCase(), operation })),
  )
  return (
    <div className="door-list">
      {tags.map(({ name, description }) => (
        <section key={name} aria-label={name}>
          <h3>{name}</h3>
          <p>{description}</p>
          <ul>
            {operations
              .filter(({ operation }) => operation.tags.includes(name))
              .map(({ path, method, operation }) => (
                <li key={operation.operationId}>
                  <code>
                    <b>{method}</b> {path}
                  </code>
                  <span>{operation.summary}</span>
                  <span className="text-soot">{whoWords(whoOf.get(operation.operationId) ?? 'anybody')}</span>
                </li>
              ))}
          </ul>
        </section>
      ))}
    </div>
  )
}

function whoWords(who: DoorDescription['who']): string {
  if (who === 'anybody') return 'everybody'
  if (who === 'sensor') return 'a sensor, by token'
  const roles = rolesFor(who)
  return roles.length === 1 ? String(roles[0]) : `${roles[0]} and above`
}
