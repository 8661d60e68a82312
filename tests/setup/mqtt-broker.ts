import { createServer, type AddressInfo, type Server, type Socket } from 'node:net'
import { Aedes, type AuthenticateError, type Client } from 'aedes'

export type TestBroker = {
  port: number
  aedes: Aedes
  /** What the broker was told on each topic, newest last; its own topics left out. */
  told: Map<string, string[]>
  /** Filters that one client has asked for. */
  filtersOf: (clientId: string) => string[]
  isConnected: (clientId: string) => boolean
  /** Publishes with QoS 1. */
  publish: (topic: string, payload: string, flags?: { retain?: boolean }) => Promise<void>
  /** The machine is gone: nobody answers, and every connection breaks without a word. Sessions stay. */
  goAway: () => Promise<void>
  comeBack: () => Promise<void>
  stop: () => Promise<void>
}

/** A broker on a port of its own, for one user. */
export async function startBroker({ userName, password }: { userName: string; password: string }): Promise<TestBroker> {
  const aedes = await Aedes.createBroker({
    authenticate: (_client, name, word, done) => {
      const isGood = name === userName && word?.toString() === password
      // 4 of MQTT 3.1.1, table 3.1.
      done(isGood ? null : (Object.assign(new Error('no'), { returnCode: 4 }) as AuthenticateError), isGood)
    },
    // Nothing of the kitchen.
    authorizeSubscribe: (_client, subscription, done) => done(null, subscription.topic.startsWith('kitchen/') ? null : subscription),
  })
  const told = new Map<string, string[]>()
  const filters = new Map<string, Set<string>>()
  aedes.on('publish', ({ topic, payload }) => {
    if (!topic.startsWith('$SYS/')) told.set(topic, [...(told.get(topic) ?? []), payload.toString()])
  })
  const ofClient = ({ id }: Client) => filters.get(id) ?? filters.set(id, new Set()).get(id)!
  aedes.on('subscribe', (subscriptions, client) => {
    for (const { topic, qos } of subscriptions) if (qos < 128) ofClient(client).add(topic)
  })
  aedes.on('unsubscribe', (topics, client) => {
    for (const topic of topics) ofClient(client).delete(topic)
  })
  const connected = new Set<string>()
  aedes.on('clientReady', ({ id }) => connected.add(id))
  aedes.on('clientDisconnect', ({ id }) => connected.delete(id))

  const sockets = new Set<Socket>()
  let server: Server
  let port = 0
  const comeBack = async () => {
    server = createServer((socket) => {
      sockets.add(socket)
      socket.on('close', () => sockets.delete(socket))
      aedes.handle(socket)
    })
    await new Promise<void>((resolve) => server.listen(port, '127.0.0.1', resolve))
    port = (server.address() as AddressInfo).port
  }
  const goAway = async () => {
    const closed = new Promise((resolve) => server.close(resolve))
    for (const socket of sockets) socket.destroy()
    await closed
  }
  await comeBack()
  return {
    port,
    aedes,
    told,
    filtersOf: (clientId) => [...(filters.get(clientId) ?? [])].toSorted(),
    isConnected: (clientId) => connected.has(clientId),
    publish: (topic, payload, { retain = false } = {}) =>
      new Promise((resolve, reject) => {
        aedes.publish({ cmd: 'publish', topic, payload, qos: 1, retain, dup: false }, (error) => (error ? reject(error) : resolve()))
      }),
    goAway,
    comeBack,
    stop: async () => {
      await new Promise<void>((resolve) => aedes.close(resolve))
      await goAway()
    },
  }
}
