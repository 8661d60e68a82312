import { z } from 'zod'
import { clearMark, setMark } from '@/app/_components/push-mark'
import {
  pushDevices,
  pushTestAnswer,
  type DeviceInput,
  type PushDevices,
  type PushScope,
  type PushTestAnswer,
} from '@/lib/notices/push-contract'

/** What this browser can do, before anybody is asked for anything. */
export type PushSupport = 'ok' | 'insecure' | 'install first' | 'unsupported' | 'blocked'

const DEVICES_ADDRESS = '/api/v1/push/subscriptions'

export function pushSupport(): PushSupport {
  if (!window.isSecureContext) return 'insecure'
  const isApple = /iPhone|iPad|iPod/.test(navigator.userAgent) || (navigator.platform === 'MacIntel' && navigator.maxTouchPoints > 1)
  const isInstalled = window.matchMedia('(display-mode: standalone)').matches
  if (isApple && !isInstalled) return 'install first'
  if (!('serviceWorker' in navigator) || !('PushManager' in window) || !('Notification' in window)) return 'unsupported'
  return Notification.permission === 'denied' ? 'blocked' : 'ok'
}

/** The browser's own subscription, where it has one. */
export async function ownSubscription(): Promise<PushSubscription | null> {
  const registration = await navigator.serviceWorker.getRegistration('/')
  return (await registration?.pushManager.getSubscription()) ?? null
}

/** Asks the person and the browser. To be called from a tap only: asked without one, some browsers never ask again. */
export async function subscribeBrowser(publicKey: string): Promise<PushSubscription> {
  // First: the answer to the tap may not wait for anything else.
  if ((await Notification.requestPermission()) !== 'granted') throw new Refused('Notices stay off: this browser was told not to show them.')
  await navigator.serviceWorker.register('/sw.js', { scope: '/', updateViaCache: 'none' })
  const { pushManager } = await navigator.serviceWorker.ready
  const known = await pushManager.getSubscription()
  // A browser subscribes to one server key at a time.
  if (known && keyOf(known) !== publicKey) await known.unsubscribe()
  try {
    return await pushManager.subscribe({ userVisibleOnly: true, applicationServerKey: publicKey })
  } catch {
    throw new Refused('The push service of this browser did not answer. Check the network, then try again.')
  }
}

/** An expected refusal whose message is a sentence for the person. */
export class Refused extends Error {}

function keyOf(subscription: PushSubscription): string | null {
  const key = subscription.options.applicationServerKey
  if (!key) return null
  return btoa(String.fromCodePoint(...new Uint8Array(key)))
    .replaceAll('+', '-')
    .replaceAll('/', '_')
    .replaceAll('=', '')
}

export async function endpointHash(subscription: PushSubscription): Promise<string> {
  const digest = await crypto.subtle.digest('SHA-256', new TextEncoder().encode(subscription.endpoint))
  return Array.from(new Uint8Array(digest), (byte) => byte.toString(16).padStart(2, '0')).join('')
}

export async function fetchDevices(): Promise<PushDevices> {
  return pushDevices.parse(await call('GET', DEVICES_ADDRESS))
}

/** Hands this browser's subscription in, or changes what it hears of. */
export async function saveDevice(subscription: PushSubscription, { publicKey, memberId }: PushDevices, scope: PushScope): Promise<void> {
  const { endpoint, keys } = subscription.toJSON()
  await call('POST', DEVICES_ADDRESS, { endpoint, keys, vapidPublicKey: publicKey, scope, label: browserName() })
  setMark({ memberId, scope })
}

export async function removeDevice(device: DeviceInput): Promise<void> {
  await call('DELETE', DEVICES_ADDRESS, device)
}

export async function testDevice(device: DeviceInput): Promise<PushTestAnswer> {
  return pushTestAnswer.parse(await call('POST', '/api/v1/push/test', device))
}

/** Turns notices off in this browser, here and on the server; before signing out as well. */
export async function forgetThisBrowser(): Promise<void> {
  if (!('serviceWorker' in navigator) || !('PushManager' in window)) return
  clearMark()
  const subscription = await ownSubscription()
  if (!subscription) return
  await removeDevice({ endpoint: subscription.endpoint })
  await subscription.unsubscribe()
}

/** 'Chrome on Android': enough to tell one's own devices apart. */
function browserName(): string {
  const { userAgent } = navigator
  const browser = /Edg\//.test(userAgent)
    ? 'Edge'
    : /Firefox\//.test(userAgent)
      ? 'Firefox'
      : /Chrome\//.test(userAgent)
        ? 'Chrome'
        : /Safari\//.test(userAgent)
          ? 'Safari'
          : 'Browser'
  const system = /Android|iPhone|iPad|Windows|Mac OS|CrOS|Linux/.exec(userAgent)?.[0]
  return system ? `${browser} on ${system.replace('Mac OS', 'Mac').replace('CrOS', 'ChromeOS')}` : browser
}

const problem = z.object({ detail: z.string() })

/** @throws {Refused} with the server's sentence. */
export async function call(method: 'GET' | 'POST' | 'DELETE', address: string, body?: unknown): Promise<unknown> {
  let response: Response
  try {
    response = await fetch(address, {
      method,
      ...(body !== undefined && { headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) }),
    })
  } catch {
    throw new Refused('The server did not answer. Check the network, then try again.')
  }
  const answer: unknown = response.status === 204 ? null : await response.json().catch(() => null)
  if (!response.ok) throw new Refused(problem.safeParse(answer).data?.detail ?? 'That did not work. Try again.')
  return answer
}
