import { useState, type ReactNode } from 'react'
import { Key } from '@/app/_components/key'
import { StuccoSwatch } from '@/app/_components/stucco-swatch'
import type { CoatingWay } from '@/lib/coats/vocabulary'
import { backToWords, deviationsOf, nearPlaces, stuccoChoices, type DipDraft } from '@/lib/floor/dip-draft'
import { stuccoWord } from '@/lib/format/coat-words'
import { formatMoment } from '@/lib/format/local-time'
import { formatSeconds } from '@/lib/format/units'
import type { Queue, QueueTree } from '@/lib/queue/contract'

const WAYS: { way: CoatingWay; word: string }[] = [
  { way: 'dip', word: 'Dip' },
  { way: 'two halves', word: 'Two halves' },
  { way: 'poured', word: 'Poured' },
  { way: 'brushed', word: 'Brushed' },
]
const AGO = [10, 20, 40] as const
const DRAIN_STEP_S = 5
const DRAIN_MOST_S = 600
const STEP_DEAF_MS = 120
const MINUTE_MS = 60_000
const PLACES_BESIDE = 2

export type DipChoicesProps = {
  draft: DipDraft
  trees: QueueTree[]
  queue: Queue
  now: number
  onChange: (change: Partial<DipDraft>) => void
  onPlaces: () => void
}

/** Bath, drain, stucco, how, when and where: filled in from the recipe, each one touch to change. */
export function DipChoices({ draft, trees, queue, now, onChange, onPlaces }: DipChoicesProps) {
  const off = deviationsOf(draft, trees)
  return (
    <>
      <Choice label="Bath" isOff={off.bath}>
        {queue.baths.map((bath) => (
          <Key key={bath.id} size={64} isChosen={draft.bathId === bath.id} onPress={() => onChange({ bathId: bath.id })}>
            <span>{bath.name}</span>
          </Key>
        ))}
        <Drain seconds={draft.drainSeconds} onChange={(drainSeconds) => onChange({ drainSeconds })} />
      </Choice>
      <Choice label="Stucco" isOff={off.stucco}>
        {stuccoChoices(trees).map((stucco) => (
          <Key key={stucco} size={64} isChosen={draft.stucco === stucco} onPress={() => onChange({ stucco })}>
            <StuccoSwatch stucco={stucco} width={40} height={24} />
            <span>{stuccoWord(stucco)}</span>
          </Key>
        ))}
      </Choice>
      <Choice label="How">
        {WAYS.map(({ way, word }) => (
          <Key key={way} size={64} isChosen={draft.way === way} onPress={() => onChange({ way })}>
            <span>{word}</span>
          </Key>
        ))}
      </Choice>
      <Done draft={draft} now={now} timeZone={queue.foundry.timeZone} onChange={onChange} />
      <Place draft={draft} trees={trees} queue={queue} onChange={onChange} onPlaces={onPlaces} />
    </>
  )
}

function Choice({ label, isOff = false, children }: { label: string; isOff?: boolean; children: ReactNode }) {
  return (
    <fieldset className="choice" aria-label={isOff ? `${label}, not the recipe` : label}>
      <span className="choice-label">
        {label}
        {isOff && <small>not the recipe</small>}
      </span>
      <div>{children}</div>
    </fieldset>
  )
}

function Drain({ seconds, onChange }: { seconds: number; onChange: (seconds: number) => void }) {
  return (
    <div className="stepper">
      <span className="choice-label">Drain</span>
      <Key
        size={64}
        icon="minus"
        deafMs={STEP_DEAF_MS}
        aria-label="5 seconds less"
        onPress={() => onChange(Math.max(0, seconds - DRAIN_STEP_S))}
      >
        {null}
      </Key>
      <output aria-label="Drain" aria-live="polite">
        {formatSeconds(seconds)}
      </output>
      <Key
        size={64}
        icon="plus"
        deafMs={STEP_DEAF_MS}
        aria-label="5 seconds more"
        onPress={() => onChange(Math.min(DRAIN_MOST_S, seconds + DRAIN_STEP_S))}
      >
        {null}
      </Key>
    </div>
  )
}

/** How long ago: four keys, or a clock to set. */
function Done({
  draft,
  now,
  timeZone,
  onChange,
}: {
  draft: DipDraft
  now: number
  timeZone: string
  onChange: DipChoicesProps['onChange']
}) {
  const { done } = draft
  if (done.kind === 'at') {
    const step = (minutes: number) => onChange({ done: { kind: 'at', at: Math.min(now, done.at + minutes * MINUTE_MS) } })
    return (
      <Choice label="Done">
        <Key size={64} onPress={() => onChange({ done: { kind: 'now' } })}>
          <span>Now</span>
        </Key>
        <Key size={64} deafMs={STEP_DEAF_MS} aria-label="1 hour earlier" onPress={() => step(-60)}>
          <span>−1 h</span>
        </Key>
        <Key size={64} deafMs={STEP_DEAF_MS} aria-label="5 minutes earlier" onPress={() => step(-5)}>
          <span>−5</span>
        </Key>
        <span className="stepper">
          <output aria-label="Time of the dip" aria-live="polite">
            {formatMoment(done.at, now, timeZone)}
          </output>
        </span>
        <Key size={64} deafMs={STEP_DEAF_MS} aria-label="5 minutes later" onPress={() => step(5)}>
          <span>+5</span>
        </Key>
        <Key size={64} deafMs={STEP_DEAF_MS} aria-label="1 hour later" onPress={() => step(60)}>
          <span>+1 h</span>
        </Key>
      </Choice>
    )
  }
  return (
    <Choice label="Done">
      <Key size={64} isChosen={done.kind === 'now'} onPress={() => onChange({ done: { kind: 'now' } })}>
        <span>Now</span>
      </Key>
      {AGO.map((minutes) => (
        <Key
          key={minutes}
          size={64}
          isChosen={done.kind === 'ago' && done.minutes === minutes}
          aria-label={`${minutes} minutes ago`}
          onPress={() => onChange({ done: { kind: 'ago', minutes } })}
        >
          <span>
            {minutes}
            <i className="choice-narrow"> min</i>
          </span>
        </Key>
      ))}
      <span className="choice-wide">min ago</span>
      <Key
        size={64}
        className="choice-other"
        // Set back to the last five minutes: nobody knows the minute of a dip made some time ago.
        onPress={() => onChange({ done: { kind: 'at', at: Math.floor((now - 60 * MINUTE_MS) / (5 * MINUTE_MS)) * 5 * MINUTE_MS } })}
      >
        <span>Other</span>
      </Key>
    </Choice>
  )
}

/** The last place first, two more along the rack, the rest one touch further. */
function Place({ draft, trees, queue, onChange, onPlaces }: Pick<DipChoicesProps, 'draft' | 'trees' | 'queue' | 'onChange' | 'onPlaces'>) {
  const near = nearPlaces(queue.places, trees, trees.length > 1 ? 1 : PLACES_BESIDE)
  const chosen = queue.places.find((place) => place.id === draft.placeId)
  const isElsewhere = chosen !== undefined && !near.includes(chosen)
  return (
    <Choice label="Place">
      <Key size={64} isChosen={draft.placeId === null} onPress={() => onChange({ placeId: null })}>
        <span>{backToWords(trees)}</span>
      </Key>
      {(isElsewhere ? [chosen, ...near.slice(1)] : near).map((place) => (
        <Key key={place.id} size={64} isChosen={draft.placeId === place.id} onPress={() => onChange({ placeId: place.id })}>
          <span>{place.name}</span>
        </Key>
      ))}
      {queue.places.length > near.length + 1 && (
        <Key size={64} className="choice-other" onPress={onPlaces}>
          <span>Other</span>
        </Key>
      )}
    </Choice>
  )
}

const PLACES_PER_PAGE = 24

/** Every place, as keys; pages where there are many. */
export function PlaceChooser({
  queue,
  chosenId,
  onChoose,
}: {
  queue: Queue
  chosenId: string | null
  onChoose: (placeId: string) => void
}) {
  const [page, setPage] = useState(0)
  const pages = Math.ceil(queue.places.length / PLACES_PER_PAGE)
  return (
    <>
      <p className="choice-label">Where does it hang now?</p>
      <div className="choose">
        {queue.places.slice(page * PLACES_PER_PAGE, (page + 1) * PLACES_PER_PAGE).map((place) => (
          <Key key={place.id} size={64} isChosen={place.id === chosenId} onPress={() => onChoose(place.id)}>
            {place.name}
          </Key>
        ))}
      </div>
      {pages > 1 && <Pager page={page} pages={pages} onPage={setPage} />}
    </>
  )
}

export function Pager({ page, pages, onPage }: { page: number; pages: number; onPage: (page: number) => void }) {
  return (
    <div className="pager">
      <Key size={64} icon="up" isOff={page === 0} onPress={() => onPage(page - 1)}>
        Before
      </Key>
      <span>
        page {page + 1} of {pages}
      </span>
      <Key size={64} icon="down" isOff={page + 1 >= pages} onPress={() => onPage(page + 1)}>
        Next
      </Key>
    </div>
  )
}

/** 'Backup slurry, coarse stucco. Dip, drain 45 s, now. Back to Rack B 2.': the sheet in one line, when warnings need the room. */
export function draftSummary(draft: DipDraft, trees: readonly QueueTree[], queue: Queue, now: number): string {
  const bath = queue.baths.find((candidate) => candidate.id === draft.bathId)?.name ?? 'Bath'
  const way = WAYS.find((candidate) => candidate.way === draft.way)?.word ?? 'Dip'
  const when =
    draft.done.kind === 'now'
      ? 'now'
      : draft.done.kind === 'ago'
        ? `${draft.done.minutes} min ago`
        : `at ${formatMoment(draft.done.at, now, queue.foundry.timeZone)}`
  const place = queue.places.find((candidate) => candidate.id === draft.placeId)?.name
  const where = place ?? backToWords(trees)
  const stucco = draft.stucco === 'none' ? 'no stucco' : `${draft.stucco} stucco`
  return `${bath}, ${stucco}. ${way}, drain ${formatSeconds(draft.drainSeconds)}, ${when}. ${where.startsWith('Back') || place ? where : `Back to ${where}`}.`
}
