// Kilnward's service worker: notices only. It keeps nothing and answers no request.

self.addEventListener('install', () => {
  // There is nothing kept that a new version could break.
  self.skipWaiting()
})

self.addEventListener('activate', (event) => {
  event.waitUntil(self.clients.claim())
})

self.addEventListener('push', (event) => {
  // Every push shows something, whatever it holds: browsers drop a subscription that stays silent.
  event.waitUntil(show(readMessage(event.data)))
})

self.addEventListener('notificationclick', (event) => {
  event.notification.close()
  event.waitUntil(open(event.notification.data?.path ?? '/'))
})

self.addEventListener('pushsubscriptionchange', (event) => {
  event.waitUntil(renew(event))
})

function readMessage(data) {
  try {
    const message = data.json()
    return {
      title: typeof message.title === 'string' ? message.title : 'Kilnward',
      body: typeof message.body === 'string' ? message.body : '',
      tag: typeof message.tag === 'string' ? message.tag : 'kilnward',
      path: typeof message.path === 'string' ? message.path : '/',
      at: typeof message.at === 'number' ? message.at : Date.now(),
    }
  } catch {
    return { title: 'Kilnward', body: 'News from the shell room.', tag: 'kilnward', path: '/', at: Date.now() }
  }
}

function show({ title, body, tag, path, at }) {
  return self.registration.showNotification(title, {
    body,
    tag,
    // A newer word about the same tree takes the older one's place and is heard again.
    renotify: true,
    timestamp: at,
    icon: '/icons/icon-192.png',
    data: { path },
  })
}

/** Our own pages only, whatever the message says. */
function ownUrl(path) {
  const url = new URL(path, self.location.origin)
  return url.origin === self.location.origin ? url.href : self.location.origin
}

async function open(path) {
  const url = ownUrl(path)
  const windows = await self.clients.matchAll({ type: 'window', includeUncontrolled: true })
  const there = windows.find((client) => client.url === url)
  if (there) return there.focus()
  // Never another page's window: somebody may be writing in it.
  return self.clients.openWindow(url)
}

/** The browser changed its subscription by itself. The page compares again at its next load; this only shortens the gap. */
async function renew(event) {
  const known = await fetch('/api/v1/push/subscriptions').then((response) => (response.ok ? response.json() : null))
  if (!known) return
  const old = event.oldSubscription && known.devices.find(matching(await hashOf(event.oldSubscription.endpoint)))
  const subscription =
    event.newSubscription ??
    (await self.registration.pushManager.subscribe({ userVisibleOnly: true, applicationServerKey: known.publicKey }))
  const { endpoint, keys } = subscription.toJSON()
  const [scope, label] = [old?.scope ?? 'every tree', old?.label ?? '']
  await send('POST', { endpoint, keys, vapidPublicKey: known.publicKey, scope, label })
  if (old && old.endpointHash !== (await hashOf(endpoint))) await send('DELETE', { id: old.id })
}

function send(method, body) {
  return fetch('/api/v1/push/subscriptions', { method, headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) })
}

const matching = (hash) => (device) => device.endpointHash === hash

async function hashOf(text) {
  const digest = await crypto.subtle.digest('SHA-256', new TextEncoder().encode(text))
  return Array.from(new Uint8Array(digest), (byte) => byte.toString(16).padStart(2, '0')).join('')
}
