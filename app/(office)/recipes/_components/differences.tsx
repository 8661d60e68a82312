import { DifferenceMark } from '@/app/(office)/recipes/_components/difference-mark'
import { cellWords, COAT_CELLS, type CoatCell, type CoatCells } from '@/lib/recipes/coat-cells'
import { hasDifferences, type CoatDifference } from '@/lib/recipes/version-differences'

const wordOf = (key: CoatCell) => (COAT_CELLS.find((cell) => cell.key === key)?.word ?? key).toLowerCase()

const coatName = ({ kind, stucco }: CoatCells) => (stucco === 'none' || kind === 'core fill' ? kind : `${kind}, ${stucco}`)

/** What differs from a version, one line a coat; coats that are the same are left out. */
export function Differences({ differences, version }: { differences: readonly CoatDifference[]; version: number }) {
  if (!hasDifferences(differences)) return <p className="text-soot">Nothing differs from version {version}.</p>
  return (
    <ul className="differences" aria-label={`Differences from version ${version}`}>
      {differences.map((difference) => {
        if (difference.what === 'same') return null
        if (difference.what === 'removed') {
          return (
            <li key={`before ${difference.before}`}>
              <DifferenceMark what="removed" />
              <span>
                Coat {difference.before} of version {version}: {coatName(difference.coat)}
              </span>
            </li>
          )
        }
        return (
          <li key={difference.number}>
            <DifferenceMark what={difference.what} />
            {difference.what === 'added' ? (
              <span>
                Coat {difference.number}: {coatName(difference.coat)}, need {cellWords('need', difference.coat.need)}
              </span>
            ) : (
              <span>
                Coat {difference.number}
                {difference.before !== difference.number && ` (was ${difference.before})`}
                {difference.changes.length > 0 && ': '}
                {difference.changes
                  .map(({ key, before, after }) => `${wordOf(key)} ${cellWords(key, after)}, was ${cellWords(key, before)}`)
                  .join('; ')}
              </span>
            )}
          </li>
        )
      })}
    </ul>
  )
}
