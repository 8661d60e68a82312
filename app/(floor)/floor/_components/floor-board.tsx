'use client'

import { useEffect, useMemo, useRef, useState } from 'react'
import { Key, KeyLink } from '@/app/_components/key'
import { arrangeFloor } from '@/lib/floor/arrange'
import { isSameRun, startDraft, withTree, type DipDraft } from '@/lib/floor/dip-draft'
import { BESIDE_SHEET_RUN_KEY, DIP_NOW_SIZES, floorMode, planFloor, type FloorMode } from '@/lib/floor/floor-plan'
import { foldDipNow, type DipNowChoice } from '@/lib/floor/fold-dip-now'
import type { SetUpLine } from '@/lib/floor/set-up'
import { tideScale } from '@/lib/floor/tide-scale'
import { NOT_CALIBRATED, timePairWords } from '@/lib/format/time-pair'
import { may, roleWords, type Role } from '@/lib/members/roles'
import type { Queue, QueueTree } from '@/lib/queue/contract'
import { refusalWords } from '../_queries/request-json'
import { useFloorQueue } from '../_queries/use-floor-queue'
import { postStir } from '../_queries/writes'
import { Announcer } from './announcer'
import { DipNow } from './dip-now'
import { DipSheet } from './dip-sheet'
import { FloorAlarms } from './floor-alarms'
import { FloorList } from './floor-list'
import { HoldSheet } from './hold-sheet'
import { NoTrees } from './no-trees'
import { Rack } from './rack'
import { RoomSheet } from './room-sheet'
import { Strip } from './strip'
import { Tide } from './tide'
import { UndoBar, type FootWord } from './undo-bar'
import { useFloorNow } from './use-floor-now'
import { useElementSize, useViewport } from './use-viewport'
import { WhoSheet } from './who-sheet'

export type FloorBoardProps = {
  initial: { etag: string; queue: Queue }
  serverNow: number
  member: { name: string; role: Role }
  /** What the room has and lacks before its first tree; empty where there are trees, or for somebody who cannot bring it about. */
  setUp: readonly SetUpLine[]
  /** Set where somebody was led here from a page that is for this role and those above it. */
  neededRole: Role | null
}

/** `sheet` tells one sheet from the next; within one the trees may change. */
type Open = { kind: 'dip'; draft: DipDraft; sheet: number } | { kind: 'room' } | { kind: 'hold' } | { kind: 'who' }

/** Before the browser has measured the page, the server draws the list with few rows. */
const ROWS_UNMEASURED = 12
const ROWS_FIRST = 30
const NO_IDS: ReadonlySet<string> = new Set()

/** The floor on the wall: what to dip now, what dries, what is done with. */
export function FloorBoard({ initial, serverNow, member, setUp, neededRole }: FloorBoardProps) {
  const floor = useFloorQueue({ ...initial, serverNow })
  const { queue, refresh } = floor
  const { timeZone } = queue.foundry
  const now = useFloorNow(serverNow, floor.clockGap)
  const viewport = useViewport()
  const mode: FloorMode = viewport ? floorMode(viewport.width, viewport.height) : 'wide'
  const [measureDeck, deck] = useElementSize({ width: 1280, height: 640 })

  const [open, setOpen] = useState<Open | null>(null)
  const [isList, setIsList] = useState(false)
  const [groupChoice, setGroupChoice] = useState<DipNowChoice>({ openKey: null, page: 0 })
  const [tidePage, setTidePage] = useState(0)
  const [stirringBathId, setStirringBathId] = useState<string | null>(null)
  const [footWord, setFootWord] = useState<FootWord | null>(
    neededRole === null ? null : { id: 0, at: serverNow, kind: 'note', words: `That page is for ${roleWords(neededRole)}.` },
  )
  /** Sheets that closed by themselves, with their numbers, by the first tree. */
  const kept = useRef(new Map<string, DipDraft>())
  const returnTo = useRef<HTMLElement | null>(null)
  const wordCount = useRef(0)
  const sheetCount = useRef(0)
  const listFrame = useRef<HTMLDivElement>(null)

  const board = useMemo(() => arrangeFloor(queue), [queue])
  const minute = Math.floor(now / 60_000) * 60_000
  const scale = useMemo(() => tideScale(minute, queue.shift, timeZone), [minute, queue.shift, timeZone])
  const canLog = may(member.role, 'dip')
  // The session has ended, or somebody has ended it: nothing of this page may stay in strange hands.
  useEffect(() => {
    if (floor.isSignedOut) window.location.assign('/sign-in?callbackUrl=%2Ffloor&ended=1')
  }, [floor.isSignedOut])
  const canHold = may(member.role, 'hold')
  const treeOf = useMemo(() => new Map(queue.trees.map((tree) => [tree.id, tree])), [queue.trees])

  const draftTrees = open?.kind === 'dip' ? open.draft.treeIds.flatMap((id) => treeOf.get(id) ?? []) : []
  const chosenIds = open?.kind === 'dip' ? new Set(open.draft.treeIds) : NO_IDS
  const hasTrees = queue.trees.length > 0
  const showsList = isList || (viewport !== null && mode === 'list')
  const boardMode = mode === 'list' ? 'wide' : mode

  const isBesideSheet = boardMode === 'portrait' && open !== null
  const sizes = isBesideSheet ? { ...DIP_NOW_SIZES[boardMode], runKey: BESIDE_SHEET_RUN_KEY } : DIP_NOW_SIZES[boardMode]
  const foldable = board.dipNow.map((group) => ({
    key: group.key,
    count: group.trees.length,
    isStirred: group.isStirred || !canLog || isBesideSheet,
  }))
  const dipNeed = foldDipNow(foldable, Number.MAX_SAFE_INTEGER, sizes, groupChoice).height || 180
  const needs = { hasBareWax: board.bareWax.length > 0, hasHeld: board.held.length > 0, isSheetOpen: open !== null }
  const atMost = planFloor(boardMode, deck.height, { ...needs, dipNeed })
  const dipPlan = foldDipNow(foldable, atMost.dipList, sizes, groupChoice)
  // Folded groups may take less than they were given: in portrait the tide has the rest.
  const heights = planFloor(boardMode, deck.height, { ...needs, dipNeed: Math.min(dipNeed, dipPlan.height || dipNeed) })

  const say = (words: FootWordContent) => {
    wordCount.current += 1
    setFootWord({ ...words, id: wordCount.current })
  }

  const show = (next: Open) => {
    returnTo.current = document.activeElement instanceof HTMLElement ? document.activeElement : null
    setOpen(next)
  }

  /** Focus goes back to the key that opened the sheet, or to the head of the column when that row has moved on. */
  const close = () => {
    setOpen(null)
    const target = returnTo.current
    requestAnimationFrame(() => {
      if (target?.isConnected) target.focus({ preventScroll: true })
      else document.getElementById(showsList ? 'list-dip-now' : 'dip-now')?.focus({ preventScroll: true })
    })
  }

  const setDraft = (update: (draft: DipDraft) => DipDraft) => {
    setOpen((current) => (current?.kind === 'dip' ? { ...current, draft: update(current.draft) } : current))
  }

  const openRun = (trees: QueueTree[]) => {
    const fresh = startDraft(trees)
    if (!fresh) return
    const before = kept.current.get(fresh.treeIds[0] ?? '')
    const first = fresh.treeIds[0]
    const group = board.dipNow.find((candidate) => candidate.trees.some((tree) => tree.id === first))
    // Where groups are folded, the one in hand stands open.
    if (group) setGroupChoice((choice) => (choice.openKey === group.key ? choice : { openKey: group.key, page: 0 }))
    sheetCount.current += 1
    show({ kind: 'dip', draft: before && isSameRun(before, fresh) ? before : fresh, sheet: sheetCount.current })
  }

  /** A row of the dip column: opens the sheet, or adds the tree to the open run, or takes it out. */
  const onTree = (tree: QueueTree) => {
    if (open?.kind !== 'dip') {
      openRun([tree])
      return
    }
    const { treeIds } = open.draft
    if (!treeIds.includes(tree.id)) setDraft((draft) => withTree(draft, tree))
    else if (treeIds.length > 1) setTreeIds(treeIds.filter((id) => id !== tree.id))
  }

  const setTreeIds = (treeIds: string[]) => setDraft((draft) => ({ ...draft, treeIds }))

  const closeDip = (isKept: boolean) => {
    if (open?.kind === 'dip') {
      const first = open.draft.treeIds[0] ?? ''
      if (isKept) kept.current.set(first, open.draft)
      else kept.current.delete(first)
    }
    close()
  }

  const stir = async (bathId: string) => {
    if (stirringBathId !== null) return
    setStirringBathId(bathId)
    const outcome = await postStir(bathId)
    await refresh()
    setStirringBathId(null)
    const name = queue.baths.find((bath) => bath.id === bathId)?.name ?? 'The bath'
    say({
      kind: 'note',
      at: now,
      words:
        outcome.kind === 'done'
          ? `${name} stirred.`
          : outcome.kind === 'refused'
            ? refusalWords(outcome.status, outcome.problem)
            : `${name}: stirring is not noted yet. ${outcome.detail} Try again.`,
    })
  }

  const [jumpTo, setJumpTo] = useState<{ section: string } | null>(null)
  const onList = (section: string) => {
    setIsList(true)
    setJumpTo({ section })
  }
  useEffect(() => {
    if (!jumpTo) return
    const heading = document.getElementById(`list-${jumpTo.section}`)
    heading?.scrollIntoView({ block: 'start' })
    heading?.focus({ preventScroll: true })
  }, [jumpTo])

  // Every tree of the sheet has left the floor meanwhile: nothing to log any more.
  const isEmptySheet = open?.kind === 'dip' && open.draft.treeIds.length > 0 && draftTrees.length === 0

  const acts = canLog ? { onTree, onRun: openRun, onStir: (bathId: string) => void stir(bathId) } : {}
  const nextUp = board.drying.find((tree) => tree.dry !== null && tree.state !== 'unknown')
  const nextWords = nextUp?.dry
    ? `Next ${nextUp.tag}: ${timePairWords(nextUp.dry, now, timeZone).text}${nextUp.isUncalibrated ? `, ${NOT_CALIBRATED}` : ''}.`
    : null
  const list = (
    <FloorList
      {...acts}
      board={board}
      now={now}
      timeZone={timeZone}
      chosenIds={chosenIds}
      stirringBathId={stirringBathId}
      firstRows={viewport ? ROWS_FIRST : ROWS_UNMEASURED}
      canLog={canLog}
    />
  )
  const classes = ['fp', viewport ? '' : 'is-unmeasured', showsList ? 'fp-shows-list' : ''].filter(Boolean).join(' ')
  const hasSheet = open !== null && !isEmptySheet

  return (
    <div className={classes} style={{ '--dip-column': `${heights.dipColumn}px` }}>
      <Strip queue={queue} now={now} memberName={member.name} onRoom={() => show({ kind: 'room' })} onWho={() => show({ kind: 'who' })} />
      <FloorAlarms queue={queue} now={now} isConnected={floor.isConnected} answeredAt={floor.answeredAt + floor.clockGap} />
      <div className="stage">
        {!hasTrees ? (
          <NoTrees canAdd={may(member.role, 'trees')} setUp={setUp} />
        ) : (
          <>
            {!showsList && (
              <main
                className="deck"
                ref={measureDeck}
                data-mode={boardMode}
                style={boardMode === 'portrait' ? { gridTemplateRows: `${heights.dipColumn}px minmax(0, 1fr)` } : undefined}
              >
                <DipNow
                  {...acts}
                  groups={board.dipNow}
                  plan={dipPlan}
                  bareWax={board.bareWax}
                  now={now}
                  chosenIds={chosenIds}
                  stirringBathId={stirringBathId}
                  isBesideSheet={isBesideSheet}
                  nextWords={nextWords}
                  canLog={canLog}
                  onOpenGroup={(openKey) => setGroupChoice({ openKey, page: 0 })}
                  onPage={(openKey, page) => setGroupChoice({ openKey, page })}
                  onList={onList}
                />
                <Tide
                  drying={board.drying}
                  onRack={board.lastCoatOn}
                  scale={scale}
                  now={now}
                  timeZone={timeZone}
                  rowsHeight={heights.tideRows}
                  page={tidePage}
                  onPage={setTidePage}
                  {...(canLog ? { onTrees: openRun } : {})}
                />
                <Rack
                  lastCoatOn={board.lastCoatOn}
                  driedOut={board.driedOut}
                  ready={board.ready}
                  held={board.held}
                  rows={heights.rackRows}
                  isNarrow={boardMode === 'compact'}
                  now={now}
                  timeZone={timeZone}
                  onList={onList}
                  {...(canLog ? { onHeld: (tree: QueueTree) => openRun([tree]) } : {})}
                />
              </main>
            )}
            {(showsList || !viewport) && (
              <main className="floor-list-scroll" ref={listFrame}>
                {list}
              </main>
            )}
          </>
        )}
        {hasSheet || footWord ? (
          <footer className="foot">
            {hasSheet && open?.kind === 'dip' && <p className="foot-note">Touch another tree to add it to this run.</p>}
          </footer>
        ) : (
          <Foot
            isList={showsList}
            canChooseView={mode !== 'list' && hasTrees}
            canHold={canHold && hasTrees}
            onBoard={() => setIsList(false)}
            onList={() => onList('dip-now')}
            onHold={() => show({ kind: 'hold' })}
            onPage={(direction) => listFrame.current?.scrollBy({ top: direction * listFrame.current.clientHeight * 0.85 })}
          />
        )}
        {open?.kind === 'dip' && !isEmptySheet && (
          <DipSheet
            key={open.sheet}
            queue={queue}
            draft={open.draft}
            trees={draftTrees}
            now={now}
            memberName={member.name}
            onChange={(change) => setDraft((draft) => ({ ...draft, ...change }))}
            onTrees={setTreeIds}
            onClose={() => closeDip(true)}
            onCancel={() => closeDip(false)}
            onLogged={(logged) => {
              closeDip(false)
              say({ kind: 'logged', at: now, logged })
              void refresh()
            }}
            onNoted={(noted) => {
              closeDip(false)
              say({ kind: 'noted', at: now, noted })
              void refresh()
            }}
            onSaid={(words) => {
              closeDip(false)
              say({ kind: 'note', at: now, words })
              void refresh()
            }}
          />
        )}
        {open?.kind === 'room' && (
          <RoomSheet
            queue={queue}
            now={now}
            canRead={may(member.role, 'read')}
            canSwitchFans={may(member.role, 'fans')}
            onClose={close}
            onSaid={(words) => {
              close()
              say({ kind: 'note', at: now, words })
              void refresh()
            }}
          />
        )}
        {open?.kind === 'hold' && (
          <HoldSheet
            trees={queue.trees.filter((tree) => tree.state !== 'held' && tree.state !== 'scrapped' && tree.state !== 'released')}
            onClose={close}
            onHeld={(tag, reason) => {
              close()
              say({ kind: 'note', at: now, words: `${tag} is held: ${reason}.` })
              void refresh()
            }}
          />
        )}
        {open?.kind === 'who' && <WhoSheet memberName={member.name} role={member.role} onClose={close} />}
        {footWord && !hasSheet && (
          <UndoBar
            key={footWord.id}
            word={footWord}
            now={now}
            timeZone={timeZone}
            onGone={() => setFootWord(null)}
            onTakenBack={(words) => {
              say({ kind: 'note', at: now, words })
              void refresh()
            }}
          />
        )}
      </div>
      <Announcer trees={queue.trees} />
    </div>
  )
}

type FootWordContent = FootWord extends infer Word ? (Word extends FootWord ? Omit<Word, 'id'> : never) : never

type FootProps = {
  isList: boolean
  canChooseView: boolean
  canHold: boolean
  onBoard: () => void
  onList: () => void
  onHold: () => void
  onPage: (direction: 1 | -1) => void
}

function Foot({ isList, canChooseView, canHold, onBoard, onList, onHold, onPage }: FootProps) {
  return (
    <nav className="foot" aria-label="Floor">
      {canChooseView && (
        <Key size={64} icon="floor" tone={isList ? 'plain' : 'ink'} onPress={onBoard}>
          Floor
        </Key>
      )}
      {canHold && (
        <Key size={64} icon="hold" onPress={onHold}>
          Hold a tree
        </Key>
      )}
      {canChooseView && (
        <Key size={64} icon="list" tone={isList ? 'ink' : 'plain'} onPress={onList}>
          As a list
        </Key>
      )}
      <KeyLink size={64} icon="tag" href="/trees">
        Office: trees
      </KeyLink>
      {canChooseView && isList && (
        <>
          <Key size={64} icon="up" onPress={() => onPage(-1)}>
            Page up
          </Key>
          <Key size={64} icon="down" onPress={() => onPage(1)}>
            Page down
          </Key>
        </>
      )}
    </nav>
  )
}
