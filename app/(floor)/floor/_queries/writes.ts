import type { DipRefusal, DipRun } from '@/lib/coats/dip-contract'
import type { Spot, Verdict, WeighingMoment } from '@/lib/coats/vocabulary'
import type { FanState } from '@/lib/drying/types'
import type { QueueTree } from '@/lib/queue/contract'
import { newOperationId } from './operation-id'
import { postJson } from './request-json'
import { areRefusals, isDipRunAnswer, isEvidenceAnswer } from './shapes'

const anyAnswer = (_json: unknown): _json is unknown => true

export const postDips = (run: DipRun) => postJson('/api/v1/dips', run, isDipRunAnswer)

export const postUndo = (operationId: string, coatIds: string[]) => postJson('/api/v1/dips/undo', { operationId, coatIds }, anyAnswer)

export const postStir = (bathId: string, operationId = newOperationId()) =>
  postJson(`/api/v1/baths/${bathId}/stirs`, { operationId }, anyAnswer)

export const postFans = (placeId: string, operationId: string, state: FanState) =>
  postJson(`/api/v1/places/${placeId}/fans`, { operationId, state }, anyAnswer)

export const postWatch = (treeId: string) => postJson(`/api/v1/trees/${treeId}/watch`, { operationId: newOperationId() }, anyAnswer)

/** One piece of evidence without its operation id. */
export type EvidenceBody = { coatNumber: number } & (
  | { kind: 'touch' | 'colour'; spot: Spot; verdict: Verdict }
  | { kind: 'weighing'; moment: WeighingMoment; massKg: number }
  | { kind: 'surface temperature'; spot: Spot; surfaceTempC: number }
)

export const postEvidence = (treeId: string, operationId: string, body: EvidenceBody) =>
  postJson(`/api/v1/trees/${treeId}/evidence`, { operationId, ...body }, isEvidenceAnswer)

/** How the newest coat feels at the spot that dries last. */
export const postTouch = ({ id, coatsOn, spots }: QueueTree, verdict: Verdict) =>
  postEvidence(id, newOperationId(), { coatNumber: coatsOn, kind: 'touch', spot: spots.at(-1) ?? 'outside', verdict })

export const postWithdrawal = (evidenceId: string, operationId: string) =>
  postJson(`/api/v1/evidence/${evidenceId}/withdrawal`, { operationId }, anyAnswer)

export const postHold = (treeId: string, operationId: string, reason: string) =>
  postJson(`/api/v1/trees/${treeId}/holds`, { operationId, reason }, anyAnswer)

export const postTypedReading = (reading: { operationId: string; sensorId: number; airTempC: number; relHumidityPct: number }) =>
  postJson('/api/v1/readings/typed', reading, anyAnswer)

/** The refused trees of a 409, if the server named any. */
export function refusedTrees(trees: unknown): DipRefusal[] {
  return areRefusals(trees) ? trees : []
}
