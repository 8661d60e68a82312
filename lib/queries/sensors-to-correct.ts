import { Op } from 'sequelize'
import { Sensor } from '@/models'

/** Sensors of which readings are still to be brought to the offsets. */
export async function loadSensorsToCorrect(): Promise<number[]> {
  const sensors = await Sensor.findAll({ attributes: ['id'], where: { correctFrom: { [Op.ne]: null } }, order: ['id'] })
  return sensors.map(({ id }) => id)
}
