import type { CoatingWay, RecessClass, Spacing, Verdict } from '@/lib/coats/vocabulary'
import type { DemoRecipe } from '@/lib/demo/shop'
import type { CupKind } from '@/lib/trees/tree-input'

/** What a tree shall be at the first start. The planning finds the dips that make the drying clock say so. */
export type Aim =
  | { kind: 'bare wax' }
  | { kind: 'wax ready' }
  /** The newest coat's guard falls so many minutes after the start; before it where negative. */
  | { kind: 'guard'; minutes: number }
  | { kind: 'waiting' }
  | { kind: 'overdue' }
  | { kind: 'wet' }
  | { kind: 'drying' }
  | { kind: 'held'; reason: string }
  /** Hangs where only a hygrometer on the wall tells the air, and the last time anybody read it is too long ago. */
  | { kind: 'unknown' }
  | { kind: 'last coat on' }
  | { kind: 'dried out' }
  | { kind: 'looked over' }
  | { kind: 'released'; daysAgo: number }
  | { kind: 'scrapped'; daysAgo: number; reason: string }

/** Something out of the ordinary in a tree's past. */
export type Story =
  /** Over one of its middle coats; the planning finds out which. */
  | { kind: 'dipped early'; overCoat?: number; reason: string }
  | { kind: 'other stucco'; coat: number; reason: string }
  | { kind: 'held overnight'; reason: string; lifted: string }
  | { kind: 'felt'; verdict: Verdict }
  | { kind: 'rough time'; coat: number }
  /** Somebody felt the wrong tree, and took it back. */
  | { kind: 'mistaken touch' }

export type DemoPiece = { workTitle: string; sectionName?: string; editionNumber: number; isRecast?: boolean }

/** One tree of the demo. Where it leaves a choice, the planning takes what makes the dips fall into working hours. */
export type CastTree = {
  pieces: readonly DemoPiece[]
  recipe: DemoRecipe
  aim: Aim
  /** Fewest and most coats on, where the aim leaves it open. */
  coatsOn?: readonly [fewest: number, most: number]
  recesses?: readonly RecessClass[]
  spacings?: readonly Spacing[]
  way?: CoatingWay
  waxMassKg: number
  cup: readonly [kind: CupKind, volumeL: number]
  hungMassKg?: number
  pour?: 'planned' | 'will miss'
  story?: Story
}

const paperCup = ['paper', 0.35] as const
const waxCup = ['wax', 0.5] as const
const largeCup = ['ceramic', 0.9] as const

const one = (workTitle: string, editionNumber: number, sectionName = ''): DemoPiece[] => [{ workTitle, sectionName, editionNumber }]

/** Freedom for coats whose guard has to fall at one moment. */
const anyShape = { recesses: ['none', 'deep recess'], spacings: ['open', 'crowded'] } as const satisfies Partial<CastTree>

/** Every tree of the demo foundry. All works and people are made up. */
export const CAST: readonly CastTree[] = [
  // Waiting for the face bath.
  { pieces: one('Hare Listening', 5), recipe: 'six', aim: { kind: 'wax ready' }, waxMassKg: 0.8, cup: paperCup, pour: 'planned' },
  {
    pieces: [{ workTitle: 'Gull on a Post', editionNumber: 5, isRecast: true }],
    recipe: 'six',
    aim: { kind: 'wax ready' },
    waxMassKg: 1.1,
    cup: paperCup,
    pour: 'planned',
  },
  { pieces: one('The Ferryman', 1, 'oar and hands'), recipe: 'eight', aim: { kind: 'wax ready' }, waxMassKg: 1.4, cup: waxCup },
  { pieces: one('Heron Standing', 2, 'legs'), recipe: 'eight', aim: { kind: 'wax ready' }, waxMassKg: 1.2, cup: waxCup },
  {
    pieces: one("Ram's Fleece", 1),
    recipe: 'eight',
    aim: { kind: 'overdue' },
    coatsOn: [1, 1],
    waxMassKg: 4.2,
    cup: largeCup,
    pour: 'planned',
  },
  { pieces: one('Tide Bell', 1), recipe: 'eight', aim: { kind: 'waiting' }, coatsOn: [1, 1], waxMassKg: 3.1, cup: waxCup, pour: 'planned' },
  {
    ...anyShape,
    pieces: one('Quay Widow', 3, 'head'),
    recipe: 'eight',
    aim: { kind: 'guard', minutes: -6 },
    coatsOn: [1, 1],
    waxMassKg: 2.3,
    cup: waxCup,
    pour: 'planned',
  },
  // Waiting for the backup bath.
  {
    pieces: one('Swimmer at Rest', 2),
    recipe: 'eleven',
    aim: { kind: 'waiting' },
    coatsOn: [3, 6],
    waxMassKg: 8.4,
    cup: largeCup,
    hungMassKg: 31,
    pour: 'planned',
  },
  {
    pieces: one('Lantern Boy', 4, 'torso'),
    recipe: 'eleven',
    aim: { kind: 'waiting' },
    coatsOn: [3, 4],
    waxMassKg: 6.2,
    cup: largeCup,
    pour: 'planned',
  },
  {
    pieces: one('Otter Gate', 1, 'panel 3'),
    recipe: 'eight',
    aim: { kind: 'waiting' },
    coatsOn: [3, 6],
    recesses: ['deep recess'],
    way: 'two halves',
    waxMassKg: 5.6,
    cup: largeCup,
    pour: 'planned',
  },
  {
    pieces: [
      { workTitle: 'Kelp Bowl', editionNumber: 3 },
      { workTitle: 'Kelp Bowl', editionNumber: 4 },
    ],
    recipe: 'six',
    aim: { kind: 'waiting' },
    coatsOn: [3, 4],
    waxMassKg: 2.2,
    cup: waxCup,
    pour: 'planned',
    story: { kind: 'felt', verdict: 'dry' },
  },
  {
    ...anyShape,
    pieces: [1, 2, 3].map((editionNumber) => ({ workTitle: 'Three Hares', editionNumber })),
    recipe: 'six',
    aim: { kind: 'guard', minutes: -4 },
    coatsOn: [3, 4],
    waxMassKg: 2.7,
    cup: waxCup,
    pour: 'planned',
  },
  {
    ...anyShape,
    pieces: one('Cormorant Wings Out', 1, 'left wing'),
    recipe: 'eight',
    aim: { kind: 'guard', minutes: -9 },
    coatsOn: [3, 6],
    waxMassKg: 3.4,
    cup: waxCup,
    pour: 'planned',
    story: { kind: 'other stucco', coat: 3, reason: 'Medium bin empty until noon, took coarse.' },
  },
  // About to be dry.
  {
    ...anyShape,
    pieces: one('The Netmender', 2),
    recipe: 'eleven',
    aim: { kind: 'guard', minutes: 5 },
    coatsOn: [3, 6],
    waxMassKg: 7.1,
    cup: largeCup,
    hungMassKg: 27.5,
    pour: 'planned',
    story: {
      kind: 'held overnight',
      reason: 'Hook looks bent. Down to the bench until Ines has seen it.',
      lifted: 'New hook in, hangs true.',
    },
  },
  {
    ...anyShape,
    pieces: one('Cormorant Wings Out', 1, 'right wing'),
    recipe: 'eight',
    aim: { kind: 'guard', minutes: 8 },
    coatsOn: [3, 6],
    waxMassKg: 3.4,
    cup: waxCup,
    pour: 'planned',
  },
  // On the way.
  {
    ...anyShape,
    pieces: one('Otter Gate', 1, 'panel 4'),
    recipe: 'eight',
    aim: { kind: 'wet' },
    coatsOn: [1, 5],
    way: 'two halves',
    waxMassKg: 5.5,
    cup: largeCup,
    pour: 'planned',
  },
  {
    ...anyShape,
    pieces: one('Heron Standing', 2, 'body'),
    recipe: 'eleven',
    aim: { kind: 'wet' },
    coatsOn: [2, 6],
    waxMassKg: 4.9,
    cup: largeCup,
    pour: 'planned',
  },
  {
    ...anyShape,
    pieces: one('Gull on a Post', 4),
    recipe: 'six',
    aim: { kind: 'wet' },
    coatsOn: [2, 4],
    waxMassKg: 1.1,
    cup: paperCup,
    pour: 'planned',
  },
  {
    ...anyShape,
    pieces: one('Lantern Boy', 4, 'head'),
    recipe: 'eight',
    aim: { kind: 'drying' },
    coatsOn: [2, 5],
    waxMassKg: 2.6,
    cup: waxCup,
    pour: 'planned',
  },
  {
    pieces: one('The Ferryman', 1, 'figure'),
    recipe: 'eleven',
    aim: { kind: 'drying' },
    coatsOn: [2, 3],
    recesses: ['none', 'closed core'],
    spacings: ['open', 'crowded'],
    way: 'two halves',
    waxMassKg: 9.3,
    cup: largeCup,
    hungMassKg: 29,
    pour: 'will miss',
  },
  {
    pieces: one('Cormorant Wings Out', 1, 'body'),
    recipe: 'eleven',
    aim: { kind: 'drying' },
    coatsOn: [3, 5],
    recesses: ['closed core'],
    spacings: ['open', 'crowded'],
    waxMassKg: 6.8,
    cup: largeCup,
  },
  {
    ...anyShape,
    pieces: one('Hare Listening', 4),
    recipe: 'six',
    aim: { kind: 'drying' },
    coatsOn: [2, 4],
    waxMassKg: 0.8,
    cup: paperCup,
    pour: 'planned',
    story: { kind: 'felt', verdict: 'not yet' },
  },
  {
    ...anyShape,
    pieces: one('Quay Widow', 3, 'skirt'),
    recipe: 'eight',
    aim: { kind: 'held', reason: 'Hairline from the shawl to the hem. Wait for Ines before the next dip.' },
    coatsOn: [3, 5],
    waxMassKg: 5.2,
    cup: largeCup,
    pour: 'planned',
  },
  { pieces: one('The Ferryman', 1, 'boat'), recipe: 'eleven', aim: { kind: 'bare wax' }, waxMassKg: 7.7, cup: largeCup },
  {
    pieces: one('Quay Widow', 3, 'hands'),
    recipe: 'six',
    aim: { kind: 'unknown' },
    coatsOn: [3, 4],
    recesses: ['deep recess'],
    waxMassKg: 0.9,
    cup: paperCup,
    pour: 'planned',
  },
  // Every coat on.
  {
    pieces: one('Otter Gate', 1, 'panel 2'),
    recipe: 'eight',
    aim: { kind: 'last coat on' },
    way: 'two halves',
    waxMassKg: 5.5,
    cup: largeCup,
    pour: 'planned',
  },
  { pieces: one('Gull on a Post', 3), recipe: 'six', aim: { kind: 'last coat on' }, waxMassKg: 1.1, cup: paperCup, pour: 'planned' },
  { pieces: one('Saltmarsh Relief', 1), recipe: 'six', aim: { kind: 'last coat on' }, waxMassKg: 3.8, cup: waxCup, pour: 'planned' },
  { pieces: one('Hare Listening', 3), recipe: 'six', aim: { kind: 'dried out' }, waxMassKg: 0.8, cup: paperCup, pour: 'planned' },
  {
    pieces: one('Swimmer at Rest', 2, 'left hand'),
    recipe: 'six',
    aim: { kind: 'dried out' },
    waxMassKg: 0.6,
    cup: paperCup,
    pour: 'planned',
  },
  {
    pieces: one('Otter Gate', 1, 'panel 1'),
    recipe: 'eight',
    aim: { kind: 'looked over' },
    way: 'two halves',
    waxMassKg: 5.6,
    cup: largeCup,
    pour: 'planned',
    story: { kind: 'rough time', coat: 4 },
  },
  { pieces: one('Gull on a Post', 2), recipe: 'six', aim: { kind: 'looked over' }, waxMassKg: 1.1, cup: paperCup, pour: 'planned' },
  // Gone from the floor.
  {
    pieces: one('Hare Listening', 1),
    recipe: 'six',
    aim: { kind: 'released', daysAgo: 6.1 },
    waxMassKg: 0.8,
    cup: paperCup,
    pour: 'planned',
  },
  {
    pieces: one('Gull on a Post', 1),
    recipe: 'six',
    aim: { kind: 'released', daysAgo: 6.1 },
    waxMassKg: 1.1,
    cup: paperCup,
    pour: 'planned',
  },
  {
    pieces: one('Kelp Bowl', 1),
    recipe: 'six',
    aim: { kind: 'released', daysAgo: 4.2 },
    waxMassKg: 1.1,
    cup: paperCup,
    pour: 'planned',
    story: { kind: 'dipped early', reason: 'Pour moved up a day, felt dry at the rim.' },
  },
  {
    pieces: one('Lantern Boy', 3, 'head'),
    recipe: 'six',
    aim: { kind: 'released', daysAgo: 3.2 },
    waxMassKg: 2.6,
    cup: waxCup,
    pour: 'planned',
  },
  {
    pieces: one('The Netmender', 1),
    recipe: 'six',
    aim: { kind: 'released', daysAgo: 2.1 },
    waxMassKg: 2.9,
    cup: waxCup,
    pour: 'planned',
    story: { kind: 'mistaken touch' },
  },
  {
    pieces: one('Hare Listening', 2),
    recipe: 'six',
    aim: { kind: 'released', daysAgo: 1.1 },
    waxMassKg: 0.8,
    cup: paperCup,
    pour: 'planned',
  },
  {
    pieces: one('Gull on a Post', 5),
    recipe: 'six',
    aim: {
      kind: 'scrapped',
      daysAgo: 4.6,
      reason: 'Slipped off the hook at the bath: shell broken through to the wax. Wax to be cast again.',
    },
    coatsOn: [3, 3],
    waxMassKg: 1.1,
    cup: paperCup,
  },
  // Further shells whose coats were weighed and felt; at the end, so that the others keep their luck.
  { pieces: one('Kelp Bowl', 2), recipe: 'six', aim: { kind: 'released', daysAgo: 5.1 }, waxMassKg: 1.2, cup: paperCup, pour: 'planned' },
  { pieces: one('Three Hares', 4), recipe: 'six', aim: { kind: 'released', daysAgo: 4.1 }, waxMassKg: 0.9, cup: paperCup, pour: 'planned' },
  {
    pieces: one('Saltmarsh Relief', 2),
    recipe: 'six',
    aim: { kind: 'released', daysAgo: 2.9 },
    waxMassKg: 3.6,
    cup: waxCup,
    pour: 'planned',
  },
]
