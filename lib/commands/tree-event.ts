import { TreeEvent } from '@/models'

export type TreeEventKind =
  | 'tree added'
  | 'tree edited'
  | 'intake passed'
  | 'coat on'
  | 'coat taken back'
  | 'looked at'
  | 'held'
  | 'hold lifted'
  | 'moved'
  | 'looked over'
  | 'released'
  | 'release taken back'
  | 'scrapped'
  | 'notice'

/** Adds a line to a tree's history. `text` is what a person reads there; the rest is for later use. */
export async function addTreeEvent(
  treeId: string,
  kind: TreeEventKind,
  { memberId, at, text, ...detail }: { memberId: string | null; at: number; text: string } & Record<string, unknown>,
): Promise<void> {
  await TreeEvent.create({ treeId, kind, memberId, at, detail: { text, ...detail } })
}
