'use client'

import { useRef, useState } from 'react'
import { Key } from '@/app/_components/key'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { coatsOnWords } from '@/lib/format/coat-words'
import type { QueueTree } from '@/lib/queue/contract'
import { newOperationId } from '../_queries/operation-id'
import { refusalWords } from '../_queries/request-json'
import { postHold } from '../_queries/writes'
import { Pager } from './dip-choices'
import { focusInput } from './reason-choice'
import { Sheet } from './sheet'
import { SheetProblem } from './sheet-problem'

const REASONS = ['Crack', 'Core shifted', 'Soft or loose shell', 'Wax broken', 'Wrong stucco or bath', 'Ask the supervisor']
const TREES_PER_PAGE = 20

export type HoldSheetProps = { trees: QueueTree[]; onClose: () => void; onHeld: (tag: string, reason: string) => void }

/** Hold a tree: the tree, then the reason. A supervisor lifts it again. */
export function HoldSheet({ trees, onClose, onHeld }: HoldSheetProps) {
  const [treeId, setTreeId] = useState<string | null>(null)
  const [find, setFind] = useState('')
  const [page, setPage] = useState(0)
  const [other, setOther] = useState<string | null>(null)
  const [trouble, setTrouble] = useState<{ title: string; detail: string } | null>(null)
  const [isSending, setIsSending] = useState(false)
  const inFlight = useRef(false)
  const attempt = useRef<{ key: string; operationId: string } | null>(null)
  const tree = trees.find((candidate) => candidate.id === treeId)

  const hold = async (reason: string) => {
    if (!tree || inFlight.current || reason.trim() === '') return
    const key = `${tree.id} ${reason}`
    if (attempt.current?.key !== key) attempt.current = { key, operationId: newOperationId() }
    inFlight.current = true
    setIsSending(true)
    setTrouble(null)
    const outcome = await postHold(tree.id, attempt.current.operationId, reason.trim())
    inFlight.current = false
    setIsSending(false)
    if (outcome.kind === 'done') {
      onHeld(tree.tag, reason.trim())
      return
    }
    if (outcome.kind === 'refused') attempt.current = null
    setTrouble(
      outcome.kind === 'refused'
        ? { title: 'Not held', detail: refusalWords(outcome.status, outcome.problem) }
        : { title: 'Not held yet. Try again', detail: outcome.detail },
    )
  }

  if (tree) {
    return (
      <Sheet
        label={`Hold ${tree.tag}`}
        heading={tree.title}
        under={`${coatsOnWords(tree)}, ${tree.place.name}.`}
        lead={<Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 60)} />}
        tone="stop"
        isTop
        isStaying={isSending || trouble !== null}
        onClose={onClose}
        foot={
          <>
            <Key size={80} onPress={() => setTreeId(null)}>
              Back
            </Key>
            {other !== null && (
              <Key size={80} tone="go" className="sheet-go" isOff={isSending || other.trim() === ''} onPress={() => void hold(other)}>
                {other.trim() === '' ? 'Say why first' : `Hold ${tree.tag}`}
              </Key>
            )}
          </>
        }
      >
        <p className="choice-label">Why? It stays on the wire until a supervisor lifts it.</p>
        <div className="choose">
          {REASONS.map((reason) => (
            <Key key={reason} size={80} className="text-26" isOff={isSending} onPress={() => void hold(reason)}>
              {reason}
            </Key>
          ))}
          <Key size={80} className="text-26" isChosen={other !== null} onPress={() => setOther((before) => before ?? '')}>
            Other
          </Key>
        </div>
        {other !== null && (
          <input
            className="input text-24"
            aria-label="Other reason"
            maxLength={300}
            placeholder="In a few words"
            ref={focusInput}
            value={other}
            onChange={(event) => setOther(event.target.value)}
          />
        )}
        {trouble && <SheetProblem title={trouble.title} detail={trouble.detail} />}
      </Sheet>
    )
  }

  const wanted = find.trim().toLowerCase()
  const found = trees.filter((candidate) => candidate.tag.toLowerCase().includes(wanted) || candidate.title.toLowerCase().includes(wanted))
  const pages = Math.max(1, Math.ceil(found.length / TREES_PER_PAGE))
  const current = Math.min(page, pages - 1)
  return (
    <Sheet label="Hold a tree" heading="Hold which tree?" tone="stop" isTop onClose={onClose}>
      {trees.length > TREES_PER_PAGE && (
        <input
          className="input text-24"
          aria-label="Find a tree by tag or name"
          placeholder="Find by tag or name"
          value={find}
          onChange={(event) => {
            setFind(event.target.value)
            setPage(0)
          }}
        />
      )}
      {found.length === 0 && (
        <p className="text-22">{trees.length === 0 ? 'Every tree on the floor is held already.' : 'No tree of that name.'}</p>
      )}
      <div className="choose">
        {found.slice(current * TREES_PER_PAGE, (current + 1) * TREES_PER_PAGE).map((candidate) => (
          <Key key={candidate.id} size={80} onPress={() => setTreeId(candidate.id)} aria-label={`${candidate.tag}, ${candidate.title}`}>
            <Tag tag={candidate.tag} height={fittedTagHeight(candidate.tag, 36)} />
          </Key>
        ))}
      </div>
      {pages > 1 && <Pager page={current} pages={pages} onPage={setPage} />}
    </Sheet>
  )
}
