import { randomBytes } from 'node:crypto'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { refuseField } from '@/lib/commands/refuse-field'
import type { Clock } from '@/lib/core/clock'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import { brokerAddressText, type BrokerInput } from '@/lib/mqtt/broker-input'
import { BROKER_PASSWORD, sealText } from '@/lib/server/sealed-text'
import { inTransaction, MqttBroker } from '@/models'

/**
 * Sets the broker that Kilnward listens to. The password is stored sealed and comes into no history. A stored one stays while none is
 * typed, but never goes to another address or user name.
 *
 * @throws {AppError} conflict with `fields` where the password has to be typed again.
 */
export function saveMqttBroker(input: BrokerInput, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    const broker = await MqttBroker.findByPk(1)
    const { isOn, address, userName, password } = input
    const fields = { isOn, address: brokerAddressText(address), userName }
    const former = broker && { isOn: broker.isOn, address: brokerAddressText(broker), userName: broker.userName }
    const hasMoved = former !== null && (former.address !== fields.address || former.userName !== userName)
    if (userName !== '' && password === '' && broker?.sealedPassword && hasMoved) {
      refuseField('password', 'The address or the user name is another: type the password again.')
    }
    const kept = userName === '' ? null : (broker?.sealedPassword ?? null)
    const row = { isOn, ...address, userName, sealedPassword: password === '' ? kept : sealText(password, BROKER_PASSWORD) }
    const changed = changedFields(former ?? {}, fields)
    if (Object.keys(changed.after).length === 0 && password === '') return
    if (broker) await broker.update(row)
    // Letters and digits alone, 23 at the most: what every broker has to take (MQTT 3.1.1, section 3.1.3.1).
    else await MqttBroker.create({ ...row, id: 1, clientId: `kilnward${randomBytes(6).toString('hex')}` })
    await addFoundryEvent(
      { type: 'mqtt', name: 'MQTT broker' },
      {
        kind: 'broker changed',
        by: member,
        at: clock.now(),
        text: `The MQTT broker was ${former === null ? 'set' : 'changed'}${password === '' ? '' : ', with a new password'}.`,
        ...changed,
      },
    )
  })
}
