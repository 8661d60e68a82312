import { readFileSync } from 'node:fs'
import { lookup } from 'node:dns'
import { Agent } from 'node:https'
import { BlockList, isIPv6, type LookupFunction } from 'node:net'
import { rootCertificates } from 'node:tls'
import webPush from 'web-push'
import type { Clock } from '@/lib/core/clock'
import { env } from '@/lib/core/env'
import { endpointProblem, isExtraHost, keysProblem } from '@/lib/notices/push-endpoint'
import { refusalWords } from '@/lib/notices/push-refusal'
import { readRetryAfter } from '@/lib/notices/retry-plan'

export type PushTarget = { endpoint: string; p256dh: string; auth: string }

export type PushOptions = { ttlSeconds: number; urgency: 'normal' | 'high'; topic: string }

export type PushOutcome =
  | { kind: 'sent' }
  /** 404 or 410: the browser has thrown the subscription away. */
  | { kind: 'gone' }
  /** Our keys, our clock or our body: sending again as it is would not help, and the device is not to blame. */
  | { kind: 'our fault'; words: string; detail: string }
  /** The service is busy or out of reach. */
  | { kind: 'retry'; words: string; detail: string; retryAfterMs: number | null }

/** The way out to the push services of the browsers. It never throws. */
export type PushSender = {
  send: (target: PushTarget, payload: string, options: PushOptions) => Promise<PushOutcome>
}

const TIMEOUT_MS = 10_000
const DETAIL_LIMIT = 300

/** A sender with the keys and trust of the settings. `words` of its outcomes may be shown; `detail` is for the log. */
export function webPushSender({ clock }: { clock: Clock }): PushSender {
  const settings = env()
  const vapidDetails = {
    subject: settings.VAPID_SUBJECT,
    publicKey: settings.VAPID_PUBLIC_KEY,
    privateKey: settings.VAPID_PRIVATE_KEY,
  }
  const ca = settings.PUSH_CA_FILE ? [...rootCertificates, readFileSync(settings.PUSH_CA_FILE, 'utf8')] : undefined
  return {
    send: async (target, payload, { ttlSeconds, urgency, topic }) => {
      // Checked again at every send: a row may be older than the rule.
      const problem = endpointProblem(target.endpoint, settings.PUSH_EXTRA_HOSTS) ?? keysProblem(target)
      if (problem) return { kind: 'our fault', words: problem, detail: problem }
      const isExtra = isExtraHost(new URL(target.endpoint).host, settings.PUSH_EXTRA_HOSTS)
      // One agent for each send, so that a send which has hung too long can be cut off whole.
      const agent = new Agent({ keepAlive: false, ...(ca && { ca }), ...(!isExtra && { lookup: publicLookup }) })
      try {
        const subscription = { endpoint: target.endpoint, keys: { p256dh: target.p256dh, auth: target.auth } }
        const sending = webPush.sendNotification(subscription, payload, {
          vapidDetails,
          TTL: ttlSeconds,
          urgency,
          topic,
          timeout: TIMEOUT_MS,
          agent,
          contentEncoding: 'aes128gcm',
        })
        await within(TIMEOUT_MS, sending)
        return { kind: 'sent' }
      } catch (error) {
        return outcomeOf(error, clock.now())
      } finally {
        agent.destroy()
      }
    },
  }
}

/** The library's own timeout counts silence only; a service that drips would hold a delivery for ever. */
function within(milliseconds: number, work: Promise<unknown>): Promise<unknown> {
  return new Promise((resolve, reject) => {
    const timer = setTimeout(() => reject(new Error('No answer in time')), milliseconds)
    work.then(resolve, reject).finally(() => clearTimeout(timer))
  })
}

function outcomeOf(error: unknown, now: number): PushOutcome {
  if (!(error instanceof webPush.WebPushError)) {
    const detail = error instanceof Error ? error.message.slice(0, DETAIL_LIMIT) : 'unknown'
    return { kind: 'retry', words: 'The push service could not be reached.', detail, retryAfterMs: null }
  }
  const { statusCode, headers, body } = error
  const detail = `${statusCode} ${body.slice(0, DETAIL_LIMIT)}`
  if (statusCode === 404 || statusCode === 410) return { kind: 'gone' }
  if (statusCode === 429 || statusCode >= 500) {
    const words = statusCode === 429 ? 'The push service asks for a pause.' : 'The push service is out of order.'
    return { kind: 'retry', words, detail, retryAfterMs: readRetryAfter(headerOf(headers, 'retry-after'), now) }
  }
  return { kind: 'our fault', words: refusalWords(statusCode), detail }
}

function headerOf(headers: Readonly<Record<string, string | string[] | undefined>>, name: string): string | undefined {
  const value = headers[name]
  return Array.isArray(value) ? value[0] : value
}

const PRIVATE = new BlockList()
for (const [network, bits] of [
  ['0.0.0.0', 8],
  ['10.0.0.0', 8],
  ['100.64.0.0', 10],
  ['127.0.0.0', 8],
  ['169.254.0.0', 16],
  ['172.16.0.0', 12],
  ['192.0.0.0', 24],
  ['192.168.0.0', 16],
  ['198.18.0.0', 15],
  ['224.0.0.0', 3],
] as const) {
  PRIVATE.addSubnet(network, bits, 'ipv4')
}
for (const [network, bits] of [
  ['::', 127],
  ['64:ff9b::', 96],
  ['fc00::', 7],
  ['fe80::', 10],
  ['ff00::', 8],
] as const) {
  PRIVATE.addSubnet(network, bits, 'ipv6')
}

/** True for an address that no push service has. IPv4 inside IPv6 counts as the IPv4 that it is. */
function isPrivateAddress(address: string): boolean {
  const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(address)?.[1]
  if (mapped !== undefined) return PRIVATE.check(mapped, 'ipv4')
  return PRIVATE.check(address, isIPv6(address) ? 'ipv6' : 'ipv4')
}

/** Refuses a known name that resolves into the own network: names can be pointed elsewhere after the subscription was checked. */
const publicLookup: LookupFunction = (hostname, options, callback) => {
  lookup(hostname, { ...options, all: true }, (error, addresses) => {
    if (error) return callback(error, '')
    const open = addresses.filter(({ address }) => !isPrivateAddress(address))
    const [first] = open
    if (!first) return callback(new Error('The push service resolves to a private address'), '')
    if (options.all) callback(null, open)
    else callback(null, first.address, first.family)
  })
}
