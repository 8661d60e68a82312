import { inTransaction, MqttBroker } from '@/models'

/** What the worker knows of its connection. Instants in epoch milliseconds. */
export type MqttConnection = { connectedSince: number | null; awaySince: number | null; trouble: string; heldFilters: string[] }

const LONGEST_TROUBLE = 500

/** Writes down how the connection to the broker stands. Without effect where no broker is set. */
export async function noteMqttConnection(connection: Partial<MqttConnection>): Promise<void> {
  const { trouble } = connection
  const values = { ...connection, ...(trouble !== undefined && { trouble: trouble.slice(0, LONGEST_TROUBLE) }) }
  await inTransaction(() => MqttBroker.update(values, { where: { id: 1 } }))
}
