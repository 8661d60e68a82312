'use client'

import { Fragment, useState } from 'react'
import Link from 'next/link'
import { DemoMark } from '@/app/_components/demo-mark'
import { HoldKey } from '@/app/_components/hold-key'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { StateMark } from '@/app/_components/state-mark'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { PourWords } from '@/app/(office)/_components/pour-words'
import { TreeSection } from '@/app/(office)/_components/tree-section'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { releaseAction } from '@/app/(office)/burnout/actions'
import type { PourVerdict } from '@/lib/burnout/pour-verdict'
import { needsConfirmation, releaseKey } from '@/lib/burnout/release-key'
import type { QueueTree } from '@/lib/queue/contract'
import type { ReleaseCheck } from '@/lib/trees/detail-contract'
import { CONFIRMATIONS, type Confirmation } from '@/lib/trees/tree-input'

export type ReleaseRow = { tree: QueueTree; checks: ReleaseCheck[]; verdict: PourVerdict | null }

const CHECK_HEADS = [
  { code: 'coats', head: 'Coats' },
  { code: 'dry', head: 'Dried out' },
  { code: 'look-over', head: 'Looked over' },
  { code: 'hold', head: 'No hold' },
] as const

const CONFIRMED_BY: Record<Confirmation, string> = { touch: 'Touch', weight: 'Weight', temperature: 'Temperature' }

/** Trees that may go, each with every line of its checks; ticked ones go together, by one held key. */
export function ReleasePlate({ rows, mayRelease, now }: { rows: ReleaseRow[]; mayRelease: boolean; now: number }) {
  const [ticked, setTicked] = useState<ReadonlySet<string>>(new Set())
  const [confirmations, setConfirmations] = useState<Readonly<Record<string, Confirmation | null>>>({})
  const form = useKeptForm(releaseAction, () => setTicked(new Set()))
  // A tree may leave this list while the page is open: only what still stands here goes.
  const chosen = rows.filter((row) => ticked.has(row.tree.id)).map(({ tree, checks }) => ({ id: tree.id, tag: tree.tag, checks }))
  const key = releaseKey(chosen, confirmations)
  const toggle = (id: string) => {
    const next = new Set(ticked)
    if (!next.delete(id)) next.add(id)
    setTicked(next)
  }
  return (
    <form {...form.formProps}>
      <div className="scroll-x">
        <table className="table burnout-table" role="table">
          <thead role="rowgroup">
            <tr role="row">
              {mayRelease && (
                <th role="columnheader" scope="col">
                  <span className="vh">Release</span>
                </th>
              )}
              <th role="columnheader" scope="col">
                Tree
              </th>
              <th role="columnheader" scope="col">
                Piece
              </th>
              <th role="columnheader" scope="col">
                Shell
              </th>
              {CHECK_HEADS.map(({ code, head }) => (
                <th key={code} role="columnheader" scope="col" className="narrow">
                  {head}
                </th>
              ))}
              <th role="columnheader" scope="col">
                Pour
              </th>
            </tr>
          </thead>
          <tbody role="rowgroup">
            {rows.map(({ tree, checks, verdict }) => {
              const confirmation = checks.find((check) => check.code === 'confirmation')
              return (
                <Fragment key={tree.id}>
                  <tr id={tree.tag} role="row" className="link-row">
                    {mayRelease && (
                      <td role="cell" className="c-tick">
                        <label className="tick">
                          <input
                            type="checkbox"
                            name="tree"
                            value={tree.id}
                            checked={ticked.has(tree.id)}
                            onChange={() => toggle(tree.id)}
                            aria-label={`Release ${tree.tag}, ${tree.title}`}
                          />
                        </label>
                      </td>
                    )}
                    <td role="cell" className="c-tag">
                      <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} />
                    </td>
                    <th role="rowheader" scope="row" className="c-piece">
                      <Link className="row-link" href={`/trees/${encodeURIComponent(tree.tag)}`} prefetch={false}>
                        {tree.title}
                      </Link>{' '}
                      {tree.isDemo && <DemoMark />}
                    </th>
                    <td role="cell" className="c-shell">
                      <TreeSection tree={tree} height={20} fit={110} isDecoration />
                      <StateMark
                        className="text-14"
                        state={tree.state}
                        since={tree.stateSince}
                        now={now}
                        words={confirmation ? 'Confirm it dry' : undefined}
                      />
                    </td>
                    {CHECK_HEADS.map(({ code, head }) => (
                      <CheckCell key={code} head={head} check={checks.find((check) => check.code === code)} />
                    ))}
                    <td role="cell">
                      <span className="cell-label" aria-hidden="true">
                        Pour:{' '}
                      </span>
                      <PourWords pourDate={tree.pourDate} verdict={verdict} />
                    </td>
                  </tr>
                  {confirmation !== undefined && needsConfirmation(checks) && (
                    <tr className="confirm-row" role="row">
                      <td role="cell" colSpan={mayRelease ? 9 : 8}>
                        <span className="flex flex-wrap items-center gap-x-4 gap-y-2">
                          <span className="flex gap-2 font-semibold text-ochre-ink">
                            <Icon name="warning" />
                            <span>{confirmation.text}</span>
                          </span>
                          {mayRelease && (
                            <span className="flex flex-wrap gap-2" role="group" aria-label={`How ${tree.tag} was confirmed dry`}>
                              {CONFIRMATIONS.map((by) => (
                                <Key
                                  key={by}
                                  isChosen={confirmations[tree.id] === by}
                                  onPress={() =>
                                    setConfirmations({ ...confirmations, [tree.id]: confirmations[tree.id] === by ? null : by })
                                  }
                                >
                                  {CONFIRMED_BY[by]}
                                </Key>
                              ))}
                              <input type="hidden" name={`confirmation.${tree.id}`} value={confirmations[tree.id] ?? ''} />
                            </span>
                          )}
                        </span>
                      </td>
                    </tr>
                  )}
                </Fragment>
              )
            })}
          </tbody>
        </table>
      </div>
      {mayRelease && (
        <div className="release-foot">
          <HoldKey
            size={56}
            tone="go"
            className="w-full"
            isOff={key.isOff || form.isPending}
            againWords="Press again to release"
            onConfirm={form.submit}
          >
            {key.text}
          </HoldKey>
          <FormMessage state={form.state} />
        </div>
      )}
    </form>
  )
}

function CheckCell({ head, check }: { head: string; check: ReleaseCheck | undefined }) {
  return (
    <td role="cell" className="narrow">
      <span className="cell-label" aria-hidden="true">
        {head}{' '}
      </span>
      {check === undefined ? (
        '–'
      ) : check.isMet ? (
        <>
          <Icon name="check" className="text-verdigris-ink" />
          <span className="vh">{check.text}</span>
        </>
      ) : (
        <span className="font-semibold text-ochre-ink">
          <Icon name="warning" /> {check.text}
        </span>
      )}
    </td>
  )
}
