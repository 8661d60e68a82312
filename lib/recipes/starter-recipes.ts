import { startingCoats, type CoatLine, type StartingCoat } from '@/lib/recipes/starting-coats'

const FIRST_FACE: CoatLine = { kind: 'face', stucco: 'fine', readAloud: 'Slowly in, turn, brush out every bubble. Fine sand at once.' }
const SECOND_FACE: CoatLine = { kind: 'face', stucco: 'fine', readAloud: 'Blow off loose sand. Prewet, drain, then dip slowly.' }
const MEDIUM: CoatLine = { kind: 'backup', stucco: 'medium', readAloud: 'Prewet, dip, drain with the cup down. Look into the undercuts.' }
const COARSE: CoatLine = { kind: 'backup', stucco: 'coarse', readAloud: 'Dip and turn once. Coarse sand all round, edges twice.' }
const SEAL: CoatLine = { kind: 'seal', stucco: 'none', readAloud: 'Slurry alone, no sand. Keep the rim of the cup clean.' }

const times = (count: number, line: CoatLine): CoatLine[] => Array.from({ length: count }, () => line)

export const STARTER_KEYS = ['small', 'usual', 'heavy'] as const
export type StarterKey = (typeof STARTER_KEYS)[number]

/** A recipe to begin with. Needs are our own starting values: not calibrated yet. */
export type StarterRecipe = { key: StarterKey; name: string; forWhat: string; coats: StartingCoat[] }

/** Three shells to begin with, from light to heavy; the seal is always last. How many coats each has is common practice, no source. */
export const STARTER_RECIPES: readonly StarterRecipe[] = [
  {
    key: 'small',
    name: 'Small shell',
    forWhat: 'For pieces that one hand holds.',
    coats: startingCoats([FIRST_FACE, SECOND_FACE, MEDIUM, ...times(2, COARSE), SEAL]),
  },
  {
    key: 'usual',
    name: 'Usual shell',
    forWhat: 'For most of the work.',
    coats: startingCoats([FIRST_FACE, SECOND_FACE, ...times(2, MEDIUM), ...times(3, COARSE), SEAL]),
  },
  {
    key: 'heavy',
    name: 'Heavy shell',
    forWhat: 'For large, flat or thick pieces.',
    coats: startingCoats([FIRST_FACE, SECOND_FACE, ...times(2, MEDIUM), ...times(5, COARSE), SEAL]),
  },
]
