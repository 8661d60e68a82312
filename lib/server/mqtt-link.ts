import { connect, type IClientOptions } from 'mqtt'
import { sha256Hex } from '@/lib/core/ids'
import { log } from '@/lib/core/log'
import { brokerAddressText, type BrokerAddress } from '@/lib/mqtt/broker-input'
import { connectionFaultWords, statusTopic, type ConnectionFault } from '@/lib/mqtt/connection-words'
import { LARGEST_MESSAGE_BYTES } from '@/lib/mqtt/read-message'

/** A message as the broker sends it. */
export type LinkMessage = { topic: string; text: string; sizeBytes: number; sha256: string; isRetained: boolean; isSentAgain: boolean }

export type LinkParts = {
  address: BrokerAddress
  clientId: string
  userName: string
  password: string | null
  /** The first wait before another try; each is twice as long, up to a minute. */
  firstWaitMs: number
  onConnect: (session: { isKept: boolean }) => void
  /** There is no connection, and why: after each failed try. */
  onAway: (trouble: string) => void
  onMessage: (message: LinkMessage) => void
}

export type MqttLink = {
  /** Whether the broker let it: false is a refusal, or a connection that broke meanwhile. */
  subscribe: (filter: string) => Promise<boolean>
  unsubscribe: (filter: string) => Promise<boolean>
  /** Says 'offline' and goes; the broker keeps the session, and what comes for it. */
  close: () => Promise<void>
}

const LONGEST_WAIT_MS = 60_000
/** A broker that has gone without a word is noticed after one and a half times this. */
const KEEPALIVE_SECONDS = 30
const CONNECT_WITHIN_MS = 15_000
/** A part of what the worker has for stopping. */
const CLOSE_WITHIN_MS = 1000
const ANSWER_WITHIN_MS = 10_000
/** In the answer to a subscription (MQTT 3.1.1, section 3.9.3). */
const REFUSED = 128
const BROKEN_OFF = 'The broker or the network ended the connection.'
const ONLINE = { qos: 1, retain: true } as const

/**
 * Opens a connection to a broker and holds it, with growing waits, until it is closed. MQTT 3.1.1, with a session that outlives the
 * connection: what comes with QoS 1 while it is away is kept by the broker. Its last will says that it is away.
 */
export function openMqttLink({ address, clientId, userName, password, firstWaitMs, onConnect, onAway, onMessage }: LinkParts): MqttLink {
  const topic = statusTopic(clientId)
  const options: IClientOptions = {
    clientId,
    clean: false,
    protocolVersion: 4,
    keepalive: KEEPALIVE_SECONDS,
    connectTimeout: CONNECT_WITHIN_MS,
    reconnectPeriod: firstWaitMs,
    // A refused password may be mended at the broker.
    reconnectOnConnackError: true,
    // What is wanted may be another than what was; the caller subscribes.
    resubscribe: false,
    will: { topic, payload: Buffer.from('offline'), ...ONLINE },
    ...(userName !== '' && { username: userName }),
    ...(password !== null && { password }),
  }
  const client = connect(brokerAddressText(address), options)
  let isClosed = false
  let failedTries = 0
  let fault: ConnectionFault | null = null
  let isOpen = false

  client.on('connect', ({ sessionPresent }) => {
    failedTries = 0
    fault = null
    isOpen = true
    client.publish(topic, 'online', ONLINE)
    onConnect({ isKept: sessionPresent })
  })
  client.on('error', (error: Error & { code?: unknown }) => {
    const { code } = error
    fault =
      typeof code === 'number'
        ? { code: '', refusal: code }
        : { code: typeof code === 'string' ? code : /timeout/i.test(error.message) ? 'ETIMEDOUT' : '', refusal: null }
  })
  // Before the package's own listener, which takes the wait from the options.
  client.prependListener('close', () => {
    client.options.reconnectPeriod = Math.min(firstWaitMs * 2 ** Math.min(failedTries, 20), LONGEST_WAIT_MS)
    failedTries += 1
    const wasOpen = isOpen
    isOpen = false
    if (isClosed) return
    onAway(wasOpen ? BROKEN_OFF : connectionFaultWords(fault ?? { code: '', refusal: null }, address))
    fault = null
  })
  client.on('message', (name, payload, { retain, dup }) => {
    const text = payload.subarray(0, LARGEST_MESSAGE_BYTES).toString('utf8')
    onMessage({ topic: name, text, sizeBytes: payload.length, sha256: sha256Hex(text), isRetained: retain, isSentAgain: dup })
  })

  return {
    subscribe: (filter) => isDone(client.subscribeAsync(filter, { qos: 1 }).then((grants) => grants.every(({ qos }) => qos !== REFUSED))),
    unsubscribe: (filter) => isDone(client.unsubscribeAsync(filter).then(() => true)),
    close: async () => {
      isClosed = true
      const isOpen = client.connected
      if (isOpen) await within(CLOSE_WITHIN_MS, client.publishAsync(topic, 'offline', ONLINE))
      await within(CLOSE_WITHIN_MS, client.endAsync(!isOpen))
      // A broker that does not answer holds up a polite end.
      client.stream.destroy()
    },
  }
}

const isDone = async (act: Promise<boolean>): Promise<boolean> => (await within(ANSWER_WITHIN_MS, act)) ?? false

/** Waits for something that may never come, for so long at the most; undefined where it failed or did not come. */
async function within<Result>(limitMs: number, act: Promise<Result>): Promise<Result | undefined> {
  let timer: NodeJS.Timeout | undefined
  const patience = new Promise<undefined>((resolve) => {
    timer = setTimeout(() => {
      log('mqtt.no-answer', { afterMs: limitMs })
      resolve(undefined)
    }, limitMs)
  })
  try {
    return await Promise.race([act.catch(() => undefined), patience])
  } finally {
    clearTimeout(timer)
  }
}
