import type { RecessClass, Spot } from '@/lib/coats/vocabulary'
import {
  learnFromCoat,
  LEAST_DEPRESSION_K,
  MEASURED_DRY_SCATTER,
  observeMoisture,
  observeSurface,
  observeVerdict,
  priorOf,
  sharedBefore,
  surfaceCooling,
  thetaPosterior,
  TOUCH_SCATTER,
  WEIGHED_MOISTURE_SIGMA,
  withoutPrior,
  type CoatAtDose,
  type Observation,
  type SharedTheta,
  type Theta,
} from '@/lib/drying/evidence'
import { RECESS_FACTOR, RECESS_SIGMA } from '@/lib/drying/need'
import { doseAtRatio, fitPage, lnNeedSd } from '@/lib/drying/page-fit'
import { coatWater, constantFrom, waterShare, weighedMoisture, type CoatMasses, type CoatWater } from '@/lib/drying/weighings'
import type { CoatFacts, EvidenceFacts, TreeFacts } from '@/lib/trees/facts'

/** The spots that a tree has, the slowest last. */
export const SPOTS_OF: Record<RecessClass, readonly Spot[]> = {
  none: ['outside'],
  'deep recess': ['outside', 'recess'],
  'closed core': ['outside', 'recess', 'core'],
  'closed core, no duct': ['outside', 'recess', 'core'],
}

/** The spot that dries last: only what was taken there speaks for the whole tree. */
export const slowestSpot = (recessClass: RecessClass): Spot => SPOTS_OF[recessClass].at(-1) ?? 'outside'

/** How much slower a spot dries than the outside, by what the slowest spot was taken for at the dip. */
function spotFactor(spot: Spot, recessClass: RecessClass, slowest: number): number {
  if (spot === 'outside') return RECESS_FACTOR.none
  return spot === slowestSpot(recessClass) ? slowest : Math.min(RECESS_FACTOR['deep recess'], slowest)
}

/** One weighing as a point of the coat's drying. */
export type WeighedPoint = { evidenceId: string; at: number; dose: number; moistureRatio: number }

/** What one piece of evidence says of theta; or why it says nothing. */
export type Heard = { evidence: EvidenceFacts; observation: Observation | null; unheard: string | null }

/** What is believed of one coat's theta, and what it rests on. */
export type CoatBelief = {
  /** Before its own evidence: the recipe's spread, moved by the tree's earlier coats. */
  prior: Theta
  theta: Theta
  heard: readonly Heard[]
  weighed: readonly WeighedPoint[]
  water: CoatWater | null
  /** Page's exponent fitted to three or more weighings; null where the starting value stands. */
  pageExponent: number | null
}

/** Dose of a coat at an instant, reference hours; null where it cannot be told any more. */
type DoseAt = (evidence: EvidenceFacts) => number | null

const BESIDE_THE_CLOCK = 'On the last coat it stands beside the clock and does not move it.'
const BEFORE_THE_STUCCO = 'It tells what the coat weighs, not how dry it is.'

/**
 * What is believed of a coat, from its own evidence up to `until` and that of the tree's coats below it.
 *
 * Each piece is held against the need at the spot where it was taken: an outside that feels dry is no news on a tree with a core, one that
 * is still wet is. The order in which they were taken does not matter.
 */
export function beliefOf(facts: TreeFacts, coat: CoatFacts, pressurePa: number, until: number, doseAt: DoseAt): CoatBelief {
  const evidence = coat.evidence.filter((piece) => piece.takenAt <= until)
  const prior = priorOf(sharedOf(facts, coat, pressurePa))
  // A finished shell is dried out by its clock and a person's word beside it: the word must not have moved the clock.
  const hearsDry = coat.number < facts.recipe.coats.length
  return believe(facts, coat, { evidence, prior, pressurePa, doseAt, hearsDry })
}

/** What the tree's coats share, as far as those below `coat` (all of them where it is null) have told. */
export function sharedOf(
  facts: TreeFacts,
  coat: Pick<CoatFacts, 'number' | 'needSpread' | 'isCalibrated'>,
  pressurePa: number,
): SharedTheta {
  let shared = sharedBefore(coat.needSpread)
  for (const below of facts.coats) {
    // What starting values got wrong is no news of a need that finished coats have set right.
    if (below.number >= coat.number || below.isCalibrated !== coat.isCalibrated || below.evidence.length === 0) continue
    const prior = priorOf(shared)
    const { theta } = believe(facts, below, { evidence: whileOpen(below), prior, pressurePa, doseAt: storedDose, hearsDry: true })
    shared = learnFromCoat(shared, prior, theta)
  }
  return shared
}

const storedDose: DoseAt = (piece) => piece.doseReferenceHours

/** What was taken while a coat was the newest: a dip that is told late may have covered it before somebody pressed a key. */
const whileOpen = (coat: CoatFacts): EvidenceFacts[] => coat.evidence.filter((piece) => piece.takenAt <= (coat.coveredAt ?? Infinity))

/**
 * What a finished coat's own evidence says, without any prior; null where it says next to nothing. On a tree with a recess only what was
 * taken at the spot that dries last: its outside and its weight tell nothing of the recess.
 */
export function outcomeOf(facts: TreeFacts, coat: CoatFacts, pressurePa: number, doseAt: DoseAt): Theta | null {
  const prior = { mean: 0, sd: coat.needSpread }
  const slowest = slowestSpot(facts.recessClass)
  const evidence = whileOpen(coat).filter((piece) => slowest === 'outside' || piece.spot === slowest)
  return withoutPrior(prior, believe(facts, coat, { evidence, prior, pressurePa, doseAt, hearsDry: true }).theta)
}

type BeliefInput = {
  evidence: readonly EvidenceFacts[]
  prior: Theta
  pressurePa: number
  doseAt: DoseAt
  /** Whether somebody's 'dry' moves the need. */
  hearsDry: boolean
}

function believe(facts: TreeFacts, coat: CoatFacts, { evidence, prior, pressurePa, doseAt, hearsDry }: BeliefInput): CoatBelief {
  const needAt = (spot: Spot) => (coat.needReferenceHours * spotFactor(spot, facts.recessClass, coat.recessFactor)) / coat.recessFactor
  const at = (spot: Spot, dose: number): CoatAtDose => ({ dose, need: needAt(spot), moistureTarget: coat.moistureTarget })
  const weighings = weigh(facts, coat, evidence, doseAt, at)
  const each = evidence.map((piece): Heard => {
    if (piece.kind === 'weighing') return { evidence: piece, ...(weighings.said.get(piece.id) ?? unheard(BEFORE_THE_STUCCO)) }
    const spot = piece.spot ?? 'outside'
    const dose = doseAt(piece)
    if (dose === null || !(dose > 0)) return { evidence: piece, ...unheard('No reading tells how far the coat was then.') }
    if (piece.verdict === 'dry' && !hearsDry) return { evidence: piece, ...unheard(BESIDE_THE_CLOCK) }
    if (piece.verdict !== null) {
      return { evidence: piece, observation: blur(spot, observeVerdict(at(spot, dose), piece.verdict, TOUCH_SCATTER)), unheard: null }
    }
    if (piece.surfaceTempC === null || piece.airTempC === null || piece.relHumidityPct === null) {
      return { evidence: piece, ...unheard('The air beside it is not known.') }
    }
    const cooling = surfaceCooling(piece.surfaceTempC, { airTempC: piece.airTempC, relHumidityPct: piece.relHumidityPct }, pressurePa)
    const observation = blur(spot, observeSurface(at(spot, dose), cooling))
    return observation === null
      ? { evidence: piece, ...unheard(`The air is too damp for it: a wet coat would cool by less than ${LEAST_DEPRESSION_K} K.`) }
      : { evidence: piece, observation, unheard: null }
  })
  const heard = oncePerJudgement(each, doseAt)
  const observations = [...heard.flatMap(({ observation }) => (observation === null ? [] : [observation])), ...weighings.joint]
  return {
    prior,
    theta: thetaPosterior(prior, observations),
    heard,
    weighed: weighings.points,
    water: weighings.water,
    pageExponent: weighings.pageExponent,
  }
}

/**
 * The same judgement said twice is one: of the 'dry' of a spot the earliest stands, of the 'not yet' the latest, of its surface
 * temperatures between the two the one that tells most, since what they do not know they all share.
 */
function oncePerJudgement(all: readonly Heard[], doseAt: DoseAt): Heard[] {
  const standing = new Map<string, Heard>()
  for (const heard of all) {
    if (heard.observation === null || heard.evidence.kind === 'weighing') continue
    const key = `${heard.evidence.spot} ${heard.observation.kind}`
    const before = standing.get(key)
    if (!before || tellsMore(heard, before, doseAt)) standing.set(key, heard)
  }
  return all.map((heard) => {
    if (heard.observation === null || heard.evidence.kind === 'weighing') return heard
    const isStanding = standing.get(`${heard.evidence.spot} ${heard.observation.kind}`) === heard
    return isStanding ? heard : { evidence: heard.evidence, ...unheard('Said of this spot already: the one that tells most counts.') }
  })
}

function tellsMore({ evidence, observation }: Heard, before: Heard, doseAt: DoseAt): boolean {
  if (observation?.kind === 'value') return before.observation?.kind === 'value' && observation.sd < before.observation.sd
  const [dose, doseBefore] = [doseAt(evidence) ?? 0, doseAt(before.evidence) ?? 0]
  return observation?.kind === 'dry' ? dose < doseBefore : dose > doseBefore
}

/** In a recess the doubt about the recess itself comes on top. */
function blur(spot: Spot, observation: Observation | null): Observation | null {
  if (observation === null || spot === 'outside') return observation
  return observation.kind === 'value'
    ? { ...observation, sd: Math.hypot(observation.sd, RECESS_SIGMA) }
    : { ...observation, scatter: Math.hypot(observation.scatter, RECESS_SIGMA) }
}

const unheard = (why: string) => ({ observation: null, unheard: why })

/** Fewer than these do not show the shape of a coat's drying. */
const FEWEST_FOR_A_FIT = 3
/** By two weighings that stayed the same a few percent of the water may be left. */
const CONSTANT_ERROR = 0.05
/** Weighings of a coat whose water is known this well do not share a doubt worth speaking of. */
const LARGEST_OWN_ERROR = 0.05
/** A coat's water known worse than this would bend the fitted shape. */
const LARGEST_WATER_ERROR = 0.1
/** The need by a fit is not known better than this, ln scale. Our own. */
const LEAST_FIT_SD = 0.05
/** A weighing that tells the moisture ratio no better than this tells nothing. */
const LARGEST_SIGMA = 0.35

type Weighings = {
  said: Map<string, Pick<Heard, 'observation' | 'unheard'>>
  /** What three or more of them say together, in place of each by itself. */
  joint: Observation[]
  points: WeighedPoint[]
  water: CoatWater | null
  pageExponent: number | null
}

function weigh(
  facts: TreeFacts,
  coat: CoatFacts,
  evidence: readonly EvidenceFacts[],
  doseAt: DoseAt,
  at: (spot: Spot, dose: number) => CoatAtDose,
): Weighings {
  const said: Weighings['said'] = new Map()
  const none: Weighings = { said, joint: [], points: [], water: null, pageExponent: null }
  const masses = massesOf(facts, coat)
  const wetKg = masses.wetKg
  const later = evidence
    .filter((piece) => piece.kind === 'weighing' && piece.moment !== 'after stucco')
    .flatMap((piece) => {
      const dose = doseAt(piece)
      return dose === null || piece.massKg === null ? [] : [{ piece, massKg: piece.massKg, dose }]
    })
    .toSorted((a, b) => a.dose - b.dose || a.piece.id.localeCompare(b.piece.id))
  const say = (piece: EvidenceFacts, why: string) => said.set(piece.id, unheard(why))
  const assumed = coatWater(masses, sharesOf(facts, coat))
  if (wetKg === null || assumed === null) {
    for (const { piece } of later) {
      say(
        piece,
        wetKg === null
          ? 'Nobody weighed it after its stucco.'
          : 'Its weights before the dip and after the stucco do not tell what the coat added.',
      )
    }
    return none
  }
  const constant = constantFrom(later, assumed, at('outside', 1).need)
  // A coat that has stopped losing water says itself how much it had.
  const dryKg = constant === null ? null : (later[constant]?.massKg ?? null)
  const water =
    dryKg === null ? assumed : (coatWater({ ...masses, dry: { massKg: dryKg, moistureRatio: 0, error: CONSTANT_ERROR } }, []) ?? assumed)

  const points: WeighedPoint[] = []
  const single: { id: string; observation: Observation & { kind: 'value' } }[] = []
  for (const [index, { piece, massKg, dose }] of later.entries()) {
    if (masses.dry !== null && piece.moment === 'before dip') {
      say(piece, 'It is what the finished coat weighed; the others are held against it.')
      continue
    }
    if (constant !== null && index >= constant) {
      points.push({ evidenceId: piece.id, at: piece.takenAt, dose, moistureRatio: 0 })
      if (index > constant) say(piece, 'It weighs what it did when it had stopped losing water.')
      else said.set(piece.id, { observation: observeVerdict(at('outside', dose), 'dry', MEASURED_DRY_SCATTER), unheard: null })
      continue
    }
    const { moistureRatio, sigma } = weighedMoisture({ wetKg, massKg, water }, WEIGHED_MOISTURE_SIGMA)
    if (moistureRatio < -0.25 || moistureRatio > 1.25) {
      say(piece, 'It does not fit the other weighings of this coat: look whether one of them is wrong.')
      continue
    }
    const shown = Math.min(1, Math.max(0, moistureRatio))
    points.push({ evidenceId: piece.id, at: piece.takenAt, dose, moistureRatio: shown })
    if (sigma > LARGEST_SIGMA) {
      say(piece, 'The scale is too coarse for the water in this coat.')
      continue
    }
    const observation = observeMoisture(at('outside', dose), Math.min(0.98, Math.max(0.02, moistureRatio)), sigma)
    if (observation?.kind !== 'value') say(piece, 'No reading tells how far the coat was then.')
    else single.push({ id: piece.id, observation })
  }
  const fit = single.length >= FEWEST_FOR_A_FIT && water.error <= LARGEST_WATER_ERROR ? fitPage(points) : null
  // Weighings whose water may be off are off together: then only the one that tells most speaks.
  const best = single.toSorted((a, b) => a.observation.sd - b.observation.sd)[0]
  const speaksFor = (id: string) => fit === null && (water.error <= LARGEST_OWN_ERROR || id === best?.id)
  for (const { id, observation } of single) {
    const isShared = fit === null && !speaksFor(id)
    said.set(id, {
      observation: speaksFor(id) ? observation : null,
      unheard: isShared ? 'Another weighing of this coat tells more.' : null,
    })
  }
  if (fit === null) return { ...none, points, water }
  const { need, moistureTarget } = at('outside', 1)
  const theta = Math.log(doseAtRatio(fit, moistureTarget) / need)
  return {
    ...none,
    points,
    water,
    joint: [{ kind: 'value', theta, sd: Math.max(LEAST_FIT_SD, lnNeedSd(fit, moistureTarget), water.error) }],
    pageExponent: fit.n,
  }
}

const beforeDip = (evidence: readonly EvidenceFacts[]): number | null =>
  evidence.findLast((piece) => piece.moment === 'before dip')?.massKg ?? null

/** Moisture ratio up to which a coat's weight before the next dip is taken for its dry mass. */
const DRY_ENOUGH = 0.1

/** What the tree weighed around a coat. */
function massesOf(facts: TreeFacts, coat: CoatFacts): CoatMasses {
  const below = facts.coats.find(({ number }) => number === coat.number - 1)
  const dryKg = coat.coveredAt === null ? null : beforeDip(coat.evidence)
  return {
    stucco: coat.stucco,
    baseKg: beforeDip(below === undefined ? facts.waxWeighings : below.evidence),
    wetKg: whileOpen(coat).findLast((piece) => piece.moment === 'after stucco')?.massKg ?? null,
    // Only where hardly any water was left by the clock: a coat dipped over wet must not teach how much it held.
    dry:
      dryKg === null || coat.moistureRatioAtRedip === null || coat.moistureRatioAtRedip > DRY_ENOUGH
        ? null
        : { massKg: dryKg, moistureRatio: coat.moistureRatioAtRedip, error: Math.hypot(0.02, coat.moistureRatioAtRedip) },
  }
}

/** Water as a share of the added mass in the tree's other finished coats of the same sort. */
function sharesOf(facts: TreeFacts, coat: CoatFacts): number[] {
  return facts.coats
    .filter((other) => other.number < coat.number && (other.stucco === 'none') === (coat.stucco === 'none'))
    .flatMap((other) => waterShare(massesOf(facts, other)) ?? [])
}
