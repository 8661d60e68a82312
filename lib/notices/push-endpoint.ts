/** Push services that browsers subscribe to. A subscription names its own address, so anything else could point the server anywhere. */
const PUSH_HOSTS = ['fcm.googleapis.com', 'push.services.mozilla.com', 'push.apple.com', 'notify.windows.com'] as const

const LONGEST_ENDPOINT = 2048
/** An uncompressed point of P-256, and RFC 8291's authentication secret. */
const P256DH_BYTES = 65
const UNCOMPRESSED_POINT = 0x04
const AUTH_BYTES = 16

/** Devices one member may have. */
export const DEVICES_PER_MEMBER = 10

export type PushKeys = { p256dh: string; auth: string }

/**
 * Why a push subscription is refused, or null where it may be sent to.
 *
 * @param extraHosts further `host:port` entries, comma separated, for the push service of the tests.
 */
export function endpointProblem(endpoint: string, extraHosts: string): string | null {
  if (endpoint.length > LONGEST_ENDPOINT) return 'The address of the push service is too long.'
  const url = URL.canParse(endpoint) ? new URL(endpoint) : null
  if (!url || url.protocol !== 'https:') return 'The address of the push service is not an https address.'
  if (url.username !== '' || url.password !== '') return 'The address of the push service holds a user name.'
  if (isExtraHost(url.host, extraHosts)) return null
  if (url.port !== '') return 'The address of the push service names a port.'
  const isKnown = PUSH_HOSTS.some((host) => url.hostname === host || url.hostname.endsWith(`.${host}`))
  return isKnown ? null : 'This push service is not known to Kilnward.'
}

/** True for a `host:port` that the settings add. */
export function isExtraHost(host: string, extraHosts: string): boolean {
  return extraHosts
    .split(',')
    .map((entry) => entry.trim())
    .includes(host)
}

/** Why the keys of a push subscription are refused, or null. */
export function keysProblem({ p256dh, auth }: PushKeys): string | null {
  const key = bytes(p256dh)
  if (key === null || key.length !== P256DH_BYTES || key[0] !== UNCOMPRESSED_POINT) return 'The key of the device is not a P-256 point.'
  return bytes(auth)?.length === AUTH_BYTES ? null : 'The secret of the device is not 16 bytes.'
}

function bytes(base64url: string): Uint8Array | null {
  const text = base64url.replace(/={1,2}$/, '')
  // One character over a group of four holds no whole byte.
  if (!/^[A-Za-z0-9_-]+$/.test(text) || text.length % 4 === 1) return null
  const binary = atob(text.replaceAll('-', '+').replaceAll('_', '/'))
  return Uint8Array.from(binary, (character) => character.codePointAt(0)!)
}
