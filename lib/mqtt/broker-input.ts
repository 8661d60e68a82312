import { z } from 'zod'
import { formText } from '@/lib/format/form-text'

const PORTS = { 'mqtt:': 1883, 'mqtts:': 8883 } as const

export type BrokerAddress = { isTls: boolean; host: string; port: number }

/**
 * Reads an address such as mqtts://broker.shop.example:8883; a port that is left out is the usual one.
 *
 * @returns the parts, or a sentence about what is wrong.
 */
export function readBrokerAddress(text: string): BrokerAddress | string {
  if (!/^mqtts?:\/\//i.test(text)) return 'The address begins with mqtt:// or, where the broker has a certificate, mqtts://.'
  if (!URL.canParse(text)) return 'This is not an address, such as mqtt://192.168.1.20:1883.'
  const url = new URL(text)
  if (url.username !== '' || url.password !== '') return 'User name and password have fields of their own.'
  if (url.hostname === '' || url.hostname.length > 253) return 'The address names no machine.'
  if (!/^\/?$/.test(url.pathname) || url.search !== '' || url.hash !== '') return 'After the port nothing follows.'
  if (url.port === '0') return 'A port is from 1 to 65535.'
  const isTls = url.protocol === 'mqtts:'
  // An IPv6 address stands in brackets in an address only.
  const host = url.hostname.replace(/^\[(.*)\]$/, '$1').toLowerCase()
  return { isTls, host, port: url.port === '' ? PORTS[isTls ? 'mqtts:' : 'mqtt:'] : Number(url.port) }
}

/**
 * The parts as an address.
 *
 * @example brokerAddressText({ isTls: false, host: '192.168.1.20', port: 1883 }) // => 'mqtt://192.168.1.20:1883'
 */
export function brokerAddressText({ isTls, host, port }: BrokerAddress): string {
  return `mqtt${isTls ? 's' : ''}://${host.includes(':') ? `[${host}]` : host}:${port}`
}

/** The broker as typed. An empty password keeps the one that is stored; without a user name there is none. */
export const brokerInput = z
  .strictObject({
    isOn: z.boolean(),
    address: z.string().transform((text, context): BrokerAddress => {
      const read = readBrokerAddress(text)
      if (typeof read !== 'string') return read
      context.addIssue({ code: 'custom', message: read })
      return z.NEVER
    }),
    userName: z.string().max(200, 'A user name has at most 200 letters.'),
    password: z.string().max(500, 'A password has at most 500 letters.'),
  })
  .refine(({ userName, password }) => userName !== '' || password === '', {
    path: ['userName'],
    message: 'A password needs a user name: MQTT knows none without.',
  })
export type BrokerInput = z.infer<typeof brokerInput>

/** Form fields of the broker. A password is taken as it is, spaces and all. */
export function readBrokerForm(form: FormData): Record<keyof BrokerInput, unknown> {
  const password = form.get('password')
  return {
    isOn: form.get('isOn') === 'on',
    address: formText(form, 'address'),
    userName: formText(form, 'userName'),
    password: typeof password === 'string' ? password : '',
  }
}
