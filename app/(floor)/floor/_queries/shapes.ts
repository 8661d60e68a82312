import type { DipRefusal, DipRunAnswer } from '@/lib/coats/dip-contract'
import type { Queue } from '@/lib/queue/contract'
import type { EvidenceAnswer } from '@/lib/trees/evidence-input'

// The doors' whole contracts are held where the answers are made, and by tests. Here it is only told apart from the page of a proxy
// or half an answer: reading contracts in full would be a quarter of the floor's script, and work for the tablet at every poll.

const isRecord = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null
const isText = (value: unknown): value is string => typeof value === 'string'
const isNumber = (value: unknown): value is number => typeof value === 'number'
const isListOf = <One>(value: unknown, isOne: (one: unknown) => one is One): value is One[] => Array.isArray(value) && value.every(isOne)
const hasId = (value: unknown): value is { id: string } => isRecord(value) && isText(value['id'])

export function isQueue(value: unknown): value is Queue {
  return (
    isRecord(value) &&
    isNumber(value['now']) &&
    isRecord(value['foundry']) &&
    isRecord(value['worker']) &&
    isListOf(value['trees'], hasId) &&
    isListOf(value['baths'], hasId) &&
    isListOf(value['places'], hasId) &&
    isListOf(value['rooms'], isRecord)
  )
}

export function isDipRunAnswer(value: unknown): value is DipRunAnswer {
  const isCoat = (coat: unknown): coat is DipRunAnswer['coats'][number] =>
    isRecord(coat) && isText(coat['coatId']) && isText(coat['tag']) && isNumber(coat['number'])
  return isRecord(value) && isText(value['operationId']) && isListOf(value['coats'], isCoat)
}

export function isEvidenceAnswer(value: unknown): value is EvidenceAnswer {
  return isRecord(value) && isText(value['evidenceId']) && isText(value['treeId'])
}

export function areRefusals(value: unknown): value is DipRefusal[] {
  return isListOf(
    value,
    (one): one is DipRefusal =>
      isRecord(one) && isText(one['treeId']) && isText(one['tag']) && isText(one['reason']) && isText(one['detail']),
  )
}

/** A problem document of the server, as far as the floor reads it. */
export type Problem = { detail: string; fields: { path: string; message: string }[]; trees: unknown }

/** Null for what is no problem document at all. */
export function readProblem(value: unknown): Problem | null {
  if (!isRecord(value)) return null
  const { detail, fields, trees } = value
  const isField = (field: unknown): field is Problem['fields'][number] =>
    isRecord(field) && isText(field['path']) && isText(field['message'])
  return {
    detail: isText(detail) ? detail : 'The server refused this.',
    fields: isListOf(fields, isField) ? fields : [],
    trees,
  }
}
