import { describe, expect, it } from 'vitest'
import { topicFilterFault, topicFits } from '@/lib/mqtt/topic-filter'

/** Examples of MQTT 3.1.1 (OASIS, 29 October 2014), sections 4.7.1 to 4.7.3. */
describe('topics by the standard', () => {
  it.each([
    'sport/tennis/player1/#',
    'sport/#',
    '#',
    'sport/tennis/#',
    '+',
    '+/tennis/#',
    'sport/+/player1',
    '/finance',
    '/',
    '$SYS/#',
    'Accounts payable',
  ])('takes %s', (filter) => expect(topicFilterFault(filter)).toBeNull())
  it.each(['', 'sport/tennis#', 'sport/tennis/#/ranking', 'sport+', 'a\u0000b', '$share/a/b', 'x'.repeat(251)])('refuses %j', (filter) =>
    expect(topicFilterFault(filter)).toMatch(/\.$/),
  )

  it.each<[string, string, boolean]>([
    ['sport/tennis/player1/#', 'sport/tennis/player1', true],
    ['sport/tennis/player1/#', 'sport/tennis/player1/ranking', true],
    ['sport/tennis/player1/#', 'sport/tennis/player1/score/wimbledon', true],
    ['sport/#', 'sport', true],
    ['#', 'a/b', true],
    ['sport/tennis/+', 'sport/tennis/player1', true],
    ['sport/tennis/+', 'sport/tennis/player1/ranking', false],
    ['sport/+', 'sport', false],
    ['sport/+', 'sport/', true],
    ['+/+', '/finance', true],
    ['/+', '/finance', true],
    ['+', '/finance', false],
    ['#', '$SYS/uptime', false],
    ['+/monitor/Clients', '$SYS/monitor/Clients', false],
    ['$SYS/#', '$SYS/uptime', true],
    ['$SYS/monitor/+', '$SYS/monitor/Clients', true],
    ['accounts', 'ACCOUNTS', false],
    ['a/b', 'a/b/c', false],
  ])('%s and %s: %s', (filter, topic, fits) => expect(topicFits(filter, topic)).toBe(fits))
})
