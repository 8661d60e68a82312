/** Kinds of coat, in the order in which a shell is built. */
export const COAT_KINDS = ['face', 'backup', 'core fill', 'seal'] as const
export type CoatKind = (typeof COAT_KINDS)[number]

/** Stucco grades, finest first. 'none' is for a seal coat: slurry alone. */
export const STUCCOS = ['fine', 'medium', 'coarse', 'none'] as const
export type Stucco = (typeof STUCCOS)[number]

/** Ways of putting a coat on. The drying clock of 'two halves' starts at the last half's stucco. */
export const COATING_WAYS = ['dip', 'two halves', 'poured', 'brushed'] as const
export type CoatingWay = (typeof COATING_WAYS)[number]

/** How hard the deepest part of a tree is to dry. */
export const RECESS_CLASSES = ['none', 'deep recess', 'closed core', 'closed core, no duct'] as const
export type RecessClass = (typeof RECESS_CLASSES)[number]

/** A tree is crowded when its smallest gap from wall to wall is under this. */
export const CROWDED_UNDER_MM = 40

export const SPACINGS = ['open', 'crowded'] as const
export type Spacing = (typeof SPACINGS)[number]

/** Which of the two promised times lets a coat be dipped over: half of such coats dry, or nine of ten. */
export const GUARDS = ['likely', 'safe'] as const
export type Guard = (typeof GUARDS)[number]

/** What a person can measure or feel on a coat. */
export const EVIDENCE_KINDS = ['weighing', 'touch', 'colour', 'surface temperature'] as const
export type EvidenceKind = (typeof EVIDENCE_KINDS)[number]

/** Where on the shell it was taken; an outside that looks dry tells nothing of a core. */
export const SPOTS = ['outside', 'recess', 'core'] as const
export type Spot = (typeof SPOTS)[number]

export const VERDICTS = ['dry', 'not yet'] as const
export type Verdict = (typeof VERDICTS)[number]

/** When a tree hangs on the scale: before a dip and after its stucco tell what the coat weighs, between them what has left it. */
export const WEIGHING_MOMENTS = ['before dip', 'after stucco', 'now'] as const
export type WeighingMoment = (typeof WEIGHING_MOMENTS)[number]
