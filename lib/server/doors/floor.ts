import { z } from 'zod'
import { dipRefusal, dipRun, dipRunAnswer, undoDips, undoDipsAnswer } from '@/lib/coats/dip-contract'
import { queue } from '@/lib/queue/contract'
import { fansAnswer, fansInput } from '@/lib/room/fans-contract'
import type { DoorDescription } from '@/lib/server/doors/door'
import { TREE_GROUPS } from '@/lib/trees/tree-groups'
import { POUR_FILTERS, TREE_SORTS } from '@/lib/trees/tree-view'
import { evidenceAnswer, evidenceInput, withdrawEvidenceAnswer, withdrawEvidenceInput } from '@/lib/trees/evidence-input'
import { holdAnswer, holdInput, placeAnswer, placeInput, stirAnswer, stirInput } from '@/lib/trees/tablet-input'

const OPERATION =
  'The operation id is made once by the sender and kept through every retry: the same id with the same body gets the first answer again.'

const OPERATION_ID = '0b9f3a52-6c1d-4a57-9f0e-2f8f5f4f7a11'
const TREE_ID = '018f7d1e-7c00-7000-8000-000000000001'
const PLACE_ID = '018f7d1e-7c00-7000-8000-000000000002'
const BATH_ID = '018f7d1e-7c00-7000-8000-000000000003'
const COAT_ID = '018f7d1e-7c00-7000-8000-000000000004'

const treeId = { schema: z.uuid(), text: 'Id of the tree, as the queue names it.' }

const DIP = {
  operationId: OPERATION_ID,
  bathId: BATH_ID,
  stucco: 'fine',
  way: 'dip',
  drainSeconds: 60,
  dippedAt: 1_791_882_000_000,
  trees: [{ treeId: TREE_ID, coatNumber: 1, placeId: PLACE_ID }],
}

export const FLOOR_DOORS: readonly DoorDescription[] = [
  {
    operationId: 'readQueue',
    method: 'GET',
    path: '/api/v1/queue',
    group: 'Floor',
    summary: 'The floor as it stands',
    text: 'Every tree with its state, its next coat and its times, the rooms, the baths and the shift. Send the ETag of the last answer as If-None-Match; an unchanged floor answers 304 and no body. The wall tablet asks every 3 seconds.',
    who: 'see',
    headers: { 'If-None-Match': { schema: z.string().optional(), text: 'ETag of the last answer.' } },
    answers: {
      200: { text: 'The floor.', schema: queue, headers: { ETag: 'Changes with the floor, and with each minute.' } },
      304: { text: 'Nothing has changed since that ETag.', headers: { ETag: 'The same as was sent.' } },
    },
  },
  {
    operationId: 'exportTrees',
    method: 'GET',
    path: '/api/v1/trees.csv',
    group: 'Floor',
    summary: 'The list of trees as a file',
    text: 'All pages of what the list of trees shows with the same words in its address. Words that it does not know are left out, never refused.',
    who: 'see',
    query: {
      q: { schema: z.string().max(80).optional(), text: 'Tag, piece or place to find.' },
      state: { schema: z.enum(TREE_GROUPS.map(({ key }) => key)).optional(), text: 'A group of states; all open trees without it.' },
      recipe: { schema: z.string().max(60).optional(), text: 'Name of a recipe.' },
      place: { schema: z.string().max(40).optional(), text: 'Name of a place.' },
      pour: { schema: z.enum(POUR_FILTERS.map(({ key }) => key)).optional(), text: 'By the pour date.' },
      sort: { schema: z.enum(TREE_SORTS).optional(), text: 'What asks for a hand first, without it.' },
      order: { schema: z.enum(['desc']).optional(), text: 'The other way round.' },
    },
    answers: { 200: { text: 'One line a tree, names of the columns in the first.', type: 'text/csv', schema: z.string() } },
  },
  {
    operationId: 'logDips',
    method: 'POST',
    path: '/api/v1/dips',
    group: 'Floor',
    summary: 'Log a run of dips',
    text: `A run of one or more trees through one bath, whole or not at all. What was made is recorded with its deviations; refused is only what cannot have happened. ${OPERATION}`,
    who: 'dip',
    body: { schema: dipRun, example: DIP },
    answers: {
      201: {
        text: 'Logged.',
        schema: dipRunAnswer,
        example: {
          operationId: OPERATION_ID,
          coats: [
            {
              coatId: COAT_ID,
              treeId: TREE_ID,
              tag: 'T-101',
              number: 1,
              likelyAt: 1_791_891_000_000,
              safeAt: 1_791_893_700_000,
              deviations: [],
            },
          ],
        },
      },
      200: { text: 'Logged before under this operation id; coats that were taken back since are marked.', schema: dipRunAnswer },
    },
    problems: ['not_found', 'conflict', 'unprocessable'],
    conflict: z.object({ trees: z.array(dipRefusal).describe('Why each refused tree was refused.') }),
  },
  {
    operationId: 'undoDips',
    method: 'POST',
    path: '/api/v1/dips/undo',
    group: 'Floor',
    summary: 'Take dips back',
    text: `All of the named coats or none; each must be the newest of its tree. The author may within ten minutes, a supervisor later with a reason. Coats are withdrawn, never deleted. ${OPERATION}`,
    who: 'undo',
    body: { schema: undoDips, example: { operationId: OPERATION_ID, coatIds: [COAT_ID] } },
    answers: {
      200: {
        text: 'Taken back.',
        schema: undoDipsAnswer,
        example: { operationId: OPERATION_ID, coats: [{ coatId: COAT_ID, treeId: TREE_ID, number: 1 }] },
      },
    },
    problems: ['not_found', 'conflict', 'unprocessable'],
  },
  {
    operationId: 'holdTree',
    method: 'POST',
    path: '/api/v1/trees/{treeId}/holds',
    group: 'Floor',
    summary: 'Hold a tree',
    text: `No dip is offered for it until a supervisor lifts the hold on the tree's page. ${OPERATION}`,
    who: 'hold',
    params: { treeId },
    body: { schema: holdInput, example: { operationId: OPERATION_ID, reason: 'Crack at the cup' } },
    answers: {
      201: { text: 'Held.', schema: holdAnswer, example: { treeId: TREE_ID, reason: 'Crack at the cup', holdId: COAT_ID } },
    },
    problems: ['not_found', 'conflict', 'unprocessable'],
  },
  {
    operationId: 'addEvidence',
    method: 'POST',
    path: '/api/v1/trees/{treeId}/evidence',
    group: 'Floor',
    summary: 'Say what was weighed, felt or seen on the newest coat',
    text: `A touch, a binder's colour, a weighing or a surface temperature, with the spot where it was taken. It moves the time of the coat. ${OPERATION}`,
    who: 'evidence',
    params: { treeId },
    body: {
      schema: evidenceInput,
      example: { operationId: OPERATION_ID, coatNumber: 5, kind: 'touch', spot: 'recess', verdict: 'not yet' },
    },
    answers: {
      201: {
        text: 'Kept.',
        schema: evidenceAnswer,
        example: {
          treeId: TREE_ID,
          evidenceId: COAT_ID,
          kind: 'touch',
          before: { likelyAt: 1_764_594_600_000, safeAt: 1_764_600_000_000 },
          after: { likelyAt: 1_764_596_400_000, safeAt: 1_764_600_900_000 },
          unheard: null,
        },
      },
    },
    problems: ['not_found', 'conflict', 'unprocessable'],
  },
  {
    operationId: 'withdrawEvidence',
    method: 'POST',
    path: '/api/v1/evidence/{evidenceId}/withdrawal',
    group: 'Floor',
    summary: 'Withdraw wrong evidence',
    text: `It stays in the history and moves nothing any more. One's own within ten minutes; a supervisor any, with a reason. ${OPERATION}`,
    who: 'evidence',
    params: { evidenceId: { schema: z.uuid(), text: 'Id of the evidence.' } },
    body: { schema: withdrawEvidenceInput, example: { operationId: OPERATION_ID } },
    answers: { 200: { text: 'Withdrawn.', schema: withdrawEvidenceAnswer, example: { evidenceId: COAT_ID, treeId: TREE_ID } } },
    problems: ['not_found', 'conflict', 'forbidden', 'unprocessable'],
  },
  {
    operationId: 'moveTree',
    method: 'POST',
    path: '/api/v1/trees/{treeId}/place',
    group: 'Floor',
    summary: 'Hang a tree somewhere else',
    text: `From now on, or since \`movedAt\`: after the newest dip, and at most an hour back unless a supervisor says so. Its drying follows the air of the new place from that moment; moves told for later than that are taken back. ${OPERATION}`,
    who: 'move',
    params: { treeId },
    body: { schema: placeInput, example: { operationId: OPERATION_ID, placeId: PLACE_ID } },
    answers: { 200: { text: 'Moved.', schema: placeAnswer, example: { treeId: TREE_ID, placeId: PLACE_ID } } },
    problems: ['not_found', 'conflict', 'unprocessable'],
  },
  {
    operationId: 'switchFans',
    method: 'POST',
    path: '/api/v1/places/{placeId}/fans',
    group: 'Floor',
    summary: "Say 'fans on' or 'fans off'",
    text: `What a person sees at a place, from this moment until the timetable's own next switch; 'timetable' takes it back. What dries there is split at the moment of the touch. What is so already changes nothing. ${OPERATION}`,
    who: 'fans',
    params: { placeId: { schema: z.uuid(), text: 'Id of the place, as the queue names it.' } },
    body: { schema: fansInput, example: { operationId: OPERATION_ID, state: 'off' } },
    answers: {
      200: {
        text: 'Taken in: how the fans stand now, and until when.',
        schema: fansAnswer,
        example: { placeId: PLACE_ID, isOn: false, until: 1_791_900_000_000 },
      },
    },
    problems: ['not_found', 'conflict', 'unprocessable'],
  },
  {
    operationId: 'stirBath',
    method: 'POST',
    path: '/api/v1/baths/{bathId}/stirs',
    group: 'Floor',
    summary: "Say 'stirred'",
    text: `Once before the first dip of the day. ${OPERATION}`,
    who: 'stir',
    params: { bathId: { schema: z.uuid(), text: 'Id of the bath, as the queue names it.' } },
    body: { schema: stirInput, example: { operationId: OPERATION_ID } },
    answers: { 201: { text: 'Kept.', schema: stirAnswer, example: { bathId: BATH_ID } } },
    problems: ['not_found', 'unprocessable'],
  },
  {
    operationId: 'watchTree',
    method: 'POST',
    path: '/api/v1/trees/{treeId}/watch',
    group: 'Floor',
    summary: "'Tell me when dry'",
    text: 'The devices of the member that hear of watched trees only hear of this one too. Twice is the same as once.',
    who: 'subscribe',
    params: { treeId },
    answers: { 204: { text: 'Watched.' } },
    problems: ['not_found'],
  },
  {
    operationId: 'unwatchTree',
    method: 'DELETE',
    path: '/api/v1/trees/{treeId}/watch',
    group: 'Floor',
    summary: 'Stop telling',
    text: 'Twice is the same as once.',
    who: 'subscribe',
    params: { treeId },
    answers: { 204: { text: 'Not watched any more.' } },
  },
]
