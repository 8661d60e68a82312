import { firstRunStep, FIRST_RUN_STEPS, type FirstRunStep, type FirstRunStock } from '@/lib/foundry/first-run'
import { Bath, Foundry, Place, Recipe, Sensor } from '@/models'

export type FirstRun = {
  /** As far as its owner has come. */
  reached: FirstRunStep
  stock: FirstRunStock
  recipeNames: string[]
}

/** Where the first run stands. */
export async function loadFirstRun(): Promise<FirstRun> {
  const [foundry, stock, recipes] = await Promise.all([Foundry.findByPk(1), firstRunStock(), Recipe.findAll({ where: { isDemo: false } })])
  return {
    reached: firstRunStep(foundry?.firstRunStep) ?? FIRST_RUN_STEPS[0],
    stock,
    recipeNames: recipes.map(({ name }) => name),
  }
}

/** How much of what the steps of the first run leave is there and in use. */
export async function firstRunStock(): Promise<FirstRunStock> {
  const inUse = { retiredAt: null, isDemo: false }
  const [faceBaths, backupBaths, sensors, places] = await Promise.all([
    Bath.count({ where: { ...inUse, kind: 'face' } }),
    Bath.count({ where: { ...inUse, kind: 'backup' } }),
    Sensor.count({ where: inUse }),
    Place.count({ where: inUse }),
  ])
  return { faceBaths, backupBaths, sensors, places }
}
