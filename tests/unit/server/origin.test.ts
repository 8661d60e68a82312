import { expect, it } from 'vitest'
import { isOwnHost } from '@/lib/server/origin'

const ADDRESS = 'https://shell.foundry.example:8443'

it.each(['localhost', 'localhost:3000', '127.0.0.1:3000', '127.1.2.3', '[::1]:3000', 'shell.foundry.example:8443'])(
  'the host %s is ours',
  (host) => expect(isOwnHost(host, ADDRESS)).toBe(true),
)

it.each([
  'elsewhere.example',
  'elsewhere.example:8443',
  'shell.foundry.example',
  'localhost.elsewhere.example',
  '127.0.0.1.elsewhere.example:3000',
  'elsewhere.example#localhost',
  '192.168.1.4:3000',
  '[::2]',
  ':',
  '',
])('the host %j is not', (host) => expect(isOwnHost(host, ADDRESS)).toBe(false))

it('none at all is not', () => expect(isOwnHost(null, ADDRESS)).toBe(false))
