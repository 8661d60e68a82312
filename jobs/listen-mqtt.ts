import { noteMqttConnection } from '@/lib/commands/note-mqtt-connection'
import { takeMqttMessages } from '@/lib/commands/take-mqtt-messages'
import type { Clock } from '@/lib/core/clock'
import { log } from '@/lib/core/log'
import { messageSorter, type SortedMessage } from '@/lib/mqtt/sort-messages'
import { loadLastMqttMessages, loadMqttPlan, type MqttPlan } from '@/lib/queries/mqtt-plan'
import { openMqttLink, type LinkMessage, type MqttLink } from '@/lib/server/mqtt-link'

export type ListenParts = {
  clock: Clock
  /** How often it looks whether the settings are others. */
  lookEveryMs?: number
  /** How long messages gather for one transaction. */
  gatherMs?: number
  firstWaitMs?: number
  /** Messages that wait for a transaction: minutes of a busy shop. What comes beyond is dropped and counted. */
  mostWaiting?: number
}

/** So many messages in one transaction: a dip that is logged meanwhile waits no longer than for these. */
const MESSAGES_AT_ONCE = 400
/** A broker gives what it held back at once. */
const HELD_BACK_WITHIN_MS = 3000
/** A message without a time may be as late as a reading may be ahead. */
const SHORT_ABSENCE_MS = 120_000
/** Of what stands in the way of a transaction, once a minute is enough. */
const FAILURE_LOG_EVERY_MS = 60_000

/**
 * Listens to the foundry's broker for as long as the worker runs. Level-triggered: every few seconds it looks at what is set, and
 * connects, subscribes, lets go or does nothing. Messages gather for a second and are then taken in one transaction.
 *
 * @returns takes what has come, says 'offline' and lets go.
 */
export function listenMqtt(parts: ListenParts): () => Promise<void> {
  const { clock, lookEveryMs = 3000, gatherMs = 1000, firstWaitMs = 1000, mostWaiting = 2000 } = parts
  const sorter = messageSorter()
  let plan: MqttPlan | null = null
  let link: MqttLink | null = null
  let connection = { isOpen: false, since: 0, heldBackUntil: 0 }
  /** Filters that the broker has of us. */
  let held: string[] = []
  let waiting: SortedMessage[] = []
  let dropped = 0
  let gathering: NodeJS.Timeout | null = null
  let lastFailureAt = 0
  let isStopping = false

  // A connection that comes while the settings change finds them changed; readings wait for neither.
  const inTurn = oneAtATime()
  const keepInTurn = oneAtATime()

  function take(message: LinkMessage) {
    const arrivedAt = clock.now()
    const sorted = sorter.sort({ ...message, arrivedAt, isHeldBack: arrivedAt < connection.heldBackUntil }, plan?.rules ?? [])
    if (sorted === null) return
    if (waiting.length < mostWaiting) waiting.push(sorted)
    else dropped += 1
    gather(gatherMs)
  }

  function gather(forMs: number) {
    gathering ??= setTimeout(() => void keepInTurn(flush), forMs)
  }

  async function flush() {
    if (gathering) clearTimeout(gathering)
    gathering = null
    const [messages, lost] = [waiting.slice(0, MESSAGES_AT_ONCE), dropped]
    waiting = waiting.slice(MESSAGES_AT_ONCE)
    dropped = 0
    if (lost > 0) log('mqtt.dropped', { messages: lost })
    try {
      await takeMqttMessages({ messages, dropped: lost }, { clock })
      if (waiting.length === 0) return
      if (isStopping) await flush()
      else gather(gatherMs)
    } catch (error) {
      // A full disk, or a writer that holds the records for long: kept for the next time, the oldest first to go.
      const kept = [...messages, ...waiting]
      waiting = kept.slice(-mostWaiting)
      dropped += lost + kept.length - waiting.length
      if (!isStopping) gather(gatherMs * 5)
      if (clock.now() - lastFailureAt < FAILURE_LOG_EVERY_MS) return
      lastFailureAt = clock.now()
      log('mqtt.not-kept', { messages: waiting.length, error: String(error).slice(0, 300) })
    }
  }

  async function onConnect(from: MqttLink, { isKept }: { isKept: boolean }) {
    if (link !== from) return
    if (!isKept) held = []
    await noteMqttConnection({ connectedSince: connection.since, awaySince: null })
    log('mqtt.connected', { isSessionKept: isKept })
    await agreeOnFilters(from)
  }

  /** Brings what the broker knows to what is wanted. */
  async function agreeOnFilters(at: MqttLink) {
    const wanted = [...new Set((plan?.rules ?? []).map(({ filter }) => filter))]
    const former = held
    const stays: string[] = []
    for (const filter of former) {
      if (wanted.includes(filter) || !(await at.unsubscribe(filter))) stays.push(filter)
    }
    const refused: string[] = []
    for (const filter of wanted.filter((each) => !former.includes(each))) {
      if (await at.subscribe(filter)) stays.push(filter)
      else refused.push(filter)
    }
    held = stays
    if (!connection.isOpen) return
    await noteMqttConnection({
      heldFilters: held,
      trouble: refused.length === 0 ? '' : `The broker does not let Kilnward listen to ${refused.join(', ')}.`,
    })
  }

  async function letGo() {
    const former = link
    link = null
    if (!former) return
    if (connection.isOpen) for (const filter of held) await former.unsubscribe(filter)
    connection.isOpen = false
    await former.close()
    held = []
  }

  function open(next: MqttPlan) {
    // Nobody knows how long a program was away that ended without a word.
    let awaySince = next.awaySince ?? 0
    let told = ''
    held = next.heldFilters
    const opened = openMqttLink({
      ...{ address: next.address, clientId: next.clientId, userName: next.userName, password: next.password, firstWaitMs },
      onConnect: (session) => {
        const since = clock.now()
        const isLong = since - awaySince > SHORT_ABSENCE_MS
        connection = { isOpen: true, since, heldBackUntil: session.isKept && isLong ? since + HELD_BACK_WITHIN_MS : 0 }
        told = ''
        void inTurn(() => onConnect(opened, session))
      },
      onAway: (trouble) => {
        if (connection.isOpen) awaySince = clock.now()
        connection = { ...connection, isOpen: false }
        if (trouble === told) return
        told = trouble
        log('mqtt.away', { trouble })
        void inTurn(async () => {
          if (link === opened && !connection.isOpen)
            await noteMqttConnection({ connectedSince: null, awaySince: awaySince || clock.now(), trouble })
        })
      },
      onMessage: take,
    })
    link = opened
  }

  async function look() {
    if (isStopping) return
    const former = plan
    let next = await loadMqttPlan()
    if (isStopping) return
    plan = next
    const isWanted = next !== null && next.isOn && !next.isPasswordLost
    if (link && (!isWanted || former === null || doorOf(former) !== doorOf(next))) {
      await letGo()
      await noteMqttConnection({ connectedSince: null, awaySince: null, trouble: '', heldFilters: [] })
      next = next && { ...next, heldFilters: [], awaySince: null }
    }
    if (isLost(next) && !isLost(former)) await noteMqttConnection({ connectedSince: null, trouble: PASSWORD_LOST })
    if (next && isWanted && !link) open(next)
    else if (link && connection.isOpen && former !== null && filtersOf(former) !== filtersOf(next)) await agreeOnFilters(link)
  }

  const begun = inTurn(async () => {
    for (const message of await loadLastMqttMessages()) sorter.note(message)
    await noteMqttConnection({ connectedSince: null })
    await look()
  })
  const looking = setInterval(() => void begun.then(() => inTurn(look)), lookEveryMs)

  return async () => {
    isStopping = true
    clearInterval(looking)
    const former = link
    link = null
    const wasOpen = connection.isOpen
    connection.isOpen = false
    await former?.close()
    await keepInTurn(flush)
    // After whatever was under way, so that nothing touches the records once this has ended.
    await inTurn(async () => {
      if (wasOpen) await noteMqttConnection({ connectedSince: null, awaySince: clock.now() })
    })
  }
}

/** Runs what it is given one after the other; what fails is logged, and the next goes on. */
function oneAtATime(): (act: () => Promise<void>) => Promise<void> {
  let last: Promise<void> = Promise.resolve()
  return (act) => {
    last = last.then(act).catch((error: unknown) => log('mqtt.failed', { error: String(error).slice(0, 300) }))
    return last
  }
}

const PASSWORD_LOST = 'The stored password cannot be read with this NEXTAUTH_SECRET: an owner types it again.'

const isLost = (plan: MqttPlan | null) => plan !== null && plan.isOn && plan.isPasswordLost

/** What a connection stands on: with another of these it is a new one. */
const doorOf = (plan: MqttPlan | null): string =>
  plan === null ? '' : JSON.stringify([plan.address, plan.clientId, plan.userName, plan.password])
const filtersOf = (plan: MqttPlan | null): string => (plan?.rules ?? []).map(({ filter }) => filter).join('\n')
