import { DataTypes, type Model } from 'sequelize'

// STRICT tables have no boolean or JSON type, and Sequelize chooses its parsers by the column's type, so a model reads these
// columns through getters. Rows read with `raw: true` pass them by and hold 0 or 1, and text.

/** Attribute over an INTEGER column of 0 and 1. */
export const flag = (name: string) => ({
  type: DataTypes.BOOLEAN,
  allowNull: false,
  get(this: Model): boolean | undefined {
    const stored: unknown = this.getDataValue(name)
    return stored === undefined ? undefined : Boolean(stored)
  },
})

/** Attribute over a TEXT column of JSON that holds an object or a list: a string is taken for the stored text. */
export const json = (name: string) => ({
  type: DataTypes.JSON,
  allowNull: false,
  get(this: Model): unknown {
    const stored: unknown = this.getDataValue(name)
    return typeof stored === 'string' ? JSON.parse(stored) : stored
  },
})
