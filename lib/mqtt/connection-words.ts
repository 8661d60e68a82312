import { brokerAddressText, type BrokerAddress } from '@/lib/mqtt/broker-input'
import { formatMoment } from '@/lib/format/local-time'

/** Kilnward's own topic, where it says 'online' or 'offline', kept by the broker. */
export const statusTopic = (clientId: string): string => `kilnward/${clientId}/status`

/** What is known of a failed connection: the code of the system or of TLS, and the number of the broker's refusal (MQTT 3.1.1, table 3.1). */
export type ConnectionFault = { code: string; refusal: number | null }

const REFUSALS: Readonly<Record<number, string>> = {
  1: 'The broker does not speak MQTT 3.1.1.',
  2: 'The broker refuses Kilnward’s client name.',
  3: 'The broker says that it is not ready.',
  4: 'The broker refuses the user name or the password.',
  5: 'The broker does not let this user in.',
}

const UNTRUSTED = /CERT|SELF_SIGNED|ISSUER|ALTNAME/

/** A sentence about why there is no connection, with what to do; it names the address and no secret. */
export function connectionFaultWords(fault: ConnectionFault, address: BrokerAddress): string {
  const { host, port } = address
  if (fault.refusal !== null) return REFUSALS[fault.refusal] ?? `The broker refuses the connection (${fault.refusal}).`
  if (fault.code === 'ECONNREFUSED') return `No broker answers at ${host}, port ${port}. See that it runs and that the port is right.`
  if (fault.code === 'ENOTFOUND' || fault.code === 'EAI_AGAIN') return `The network does not know the name ${host}.`
  if (/^(?:EHOSTUNREACH|ENETUNREACH|ETIMEDOUT|EHOSTDOWN)$/.test(fault.code)) return `${host} cannot be reached over the network.`
  if (UNTRUSTED.test(fault.code)) {
    return `The broker’s certificate is not trusted (${fault.code}). For one of your own authority set NODE_EXTRA_CA_CERTS.`
  }
  if (/^(?:EPROTO|ERR_SSL)/.test(fault.code)) return `Port ${port} of ${host} does not speak TLS as asked. Is it mqtt:// and not mqtts://?`
  if (fault.code === 'ECONNRESET' || fault.code === '') {
    return `${brokerAddressText(address)} ended the connection before it stood. Is the port right, and is it for ${address.isTls ? 'mqtts' : 'mqtt'}?`
  }
  return `The connection to ${host} failed (${fault.code}).`
}

/** How the connection stands. Instants in epoch milliseconds. */
export type ConnectionState = {
  isOn: boolean
  connectedSince: number | null
  awaySince: number | null
  /** A sentence; empty where there is none. */
  trouble: string
  /** Whether the worker, which holds the connection, is there. */
  isWorkerAlive: boolean
}

/** How the connection stands in a few words, and whether that is as it should be. */
export function connectionWords(
  state: ConnectionState,
  { now, timeZone }: { now: number; timeZone: string },
): { isGood: boolean; text: string } {
  if (!state.isOn) return { isGood: true, text: 'Switched off.' }
  if (!state.isWorkerAlive) return { isGood: false, text: 'Kilnward’s worker stands still, and with it the connection. Upkeep says more.' }
  if (state.connectedSince !== null) {
    const since = `Connected since ${formatMoment(state.connectedSince, now, timeZone)}.`
    return { isGood: state.trouble === '', text: state.trouble === '' ? since : `${since} ${state.trouble}` }
  }
  if (state.awaySince === null && state.trouble === '') return { isGood: true, text: 'Connecting.' }
  if (state.awaySince === null) return { isGood: false, text: `Not connected. ${state.trouble}` }
  return { isGood: false, text: `Not connected since ${formatMoment(state.awaySince, now, timeZone)}. ${state.trouble}`.trim() }
}
