import { Fragment, type ReactNode } from 'react'
import { StuccoSwatch } from '@/app/_components/stucco-swatch'
import { DifferenceMark } from '@/app/(office)/recipes/_components/difference-mark'
import { calibratedWords } from '@/lib/calibration/calibration-words'
import type { StoredCoat } from '@/lib/queries/version-coats'
import { cellWords, COAT_CELLS, coatCells, type CoatCell } from '@/lib/recipes/coat-cells'
import type { CoatDifference } from '@/lib/recipes/version-differences'

const FIGURES: ReadonlySet<CoatCell> = new Set(['need', 'target', 'drain', 'longestWait'])

/** The coats of a version. What differs from the version before is marked in its cell, and a coat that was taken out keeps a line. */
export function CoatTable({
  coats,
  isCalibrated,
  differences,
}: {
  coats: readonly StoredCoat[]
  /** The version as a whole is. */
  isCalibrated: boolean
  differences: readonly CoatDifference[]
}) {
  const lines: CoatDifference[] =
    differences.length > 0 ? [...differences] : coats.map(({ number }) => ({ what: 'same' as const, number, before: number, changes: [] }))
  return (
    <div className="coat-table-box">
      <table className="table coat-table" role="table">
        <thead role="rowgroup">
          <tr role="row">
            <th role="columnheader" scope="col">
              Coat
            </th>
            {COAT_CELLS.map(({ key, word, unit }) => (
              <th key={key} role="columnheader" scope="col" className={FIGURES.has(key) ? 'right' : undefined}>
                {word}
                {unit !== '' && <span className="unit">{key === 'need' ? 'reference h' : unit}</span>}
              </th>
            ))}
          </tr>
        </thead>
        <tbody role="rowgroup">
          {lines.map((line) => (
            <Fragment key={'number' in line ? line.number : `before ${line.before}`}>
              {line.what === 'removed' ? (
                <RemovedRow line={line} />
              ) : (
                <Row line={line} coat={coats[line.number - 1]} isCalibrated={isCalibrated} />
              )}
            </Fragment>
          ))}
        </tbody>
      </table>
    </div>
  )
}

function RemovedRow({ line }: { line: Extract<CoatDifference, { what: 'removed' }> }) {
  return (
    <tr role="row" className="is-removed">
      <th role="rowheader" scope="row" className="c-number">
        <DifferenceMark what="removed" />
      </th>
      <td role="cell" colSpan={COAT_CELLS.length}>
        <s>
          Coat {line.before} before: {line.coat.kind}
          {line.coat.stucco === 'none' ? '' : `, ${line.coat.stucco}`}, {line.coat.bath}, need {cellWords('need', line.coat.need)}
        </s>
      </td>
    </tr>
  )
}

function Row({
  line,
  coat,
  isCalibrated,
}: {
  line: Exclude<CoatDifference, { what: 'removed' }>
  coat: StoredCoat | undefined
  isCalibrated: boolean
}) {
  if (coat === undefined) return null
  const cells = coatCells(coat)
  const changes = new Map('changes' in line ? line.changes.map((change) => [change.key, change.before]) : [])
  const content: Partial<Record<CoatCell, ReactNode>> = {
    stucco: (
      <span className="c-swatch">
        <StuccoSwatch stucco={coat.stucco} width={40} height={22} />
        {cells.stucco}
      </span>
    ),
    readAloud: cells.readAloud === '' ? <span className="text-soot">nothing</span> : cells.readAloud,
  }
  return (
    <tr role="row" className={line.what === 'added' ? 'is-added' : undefined}>
      <th role="rowheader" scope="row" className="c-number">
        <span className="num">{coat.number}</span>
        {line.what === 'added' && <DifferenceMark what="added" />}
        {line.what === 'moved' && <DifferenceMark what="moved" words={`moved, was ${line.before}`} />}
        {line.what !== 'added' && line.what !== 'moved' && line.before !== line.number && <span className="was">was {line.before}</span>}
      </th>
      {COAT_CELLS.map(({ key, word, unit }) => {
        const before = changes.get(key)
        return (
          <td
            key={key}
            role="cell"
            className={[`c-${key}`, FIGURES.has(key) ? 'right' : '', before === undefined ? '' : 'is-changed'].filter(Boolean).join(' ')}
          >
            <span className="cell-label">{word} </span>
            <span className={FIGURES.has(key) ? 'num' : undefined}>{content[key] ?? cells[key]}</span>
            {unit !== '' && <span className="cell-label"> {unit}</span>}
            {key === 'need' && (coat.calibratedByCoats !== null || !isCalibrated) && (
              <span className="block text-14 text-soot">{calibratedWords(coat.calibratedByCoats)}</span>
            )}
            {before !== undefined && <DifferenceMark what="changed" words={`was ${before === '' ? 'nothing' : before}`} />}
          </td>
        )
      })}
    </tr>
  )
}
