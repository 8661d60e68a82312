/**
 * States of a tree, derived from what is stored and never stored themselves. First match wins, in this order;
 * `wet`, `drying` and `nearly dry` come from the drying clock of the newest coat.
 */
export const TREE_STATES = [
  'scrapped',
  'released',
  'held',
  'bare wax',
  'wax ready',
  'overdue',
  'dip now',
  'waiting',
  'unknown',
  'nearly dry',
  'drying',
  'wet',
  'last coat on',
  'dried out',
  'ready for burnout',
] as const
export type TreeState = (typeof TREE_STATES)[number]
