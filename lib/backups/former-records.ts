/**
 * Where the records of before lie after a restore that stopped, as sentences; empty where there were none.
 *
 * @param moved names of the files that lie in `aside` now; `left` of those still where they were, in `folder`.
 * @example formerRecords({ moved: [], left: ['kilnward.sqlite'], folder: 'data', aside: 'data/set-aside-x' })
 *   // => 'The records of before lie in data as they were: nothing of them was moved.'
 */
export function formerRecords({ moved, left, folder, aside }: { moved: string[]; left: string[]; folder: string; aside: string }): string {
  if (moved.length === 0) return left.length === 0 ? '' : `The records of before lie in ${folder} as they were: nothing of them was moved.`
  if (left.length === 0) return `The records of before lie in ${aside}, all of them.`
  return [
    `Of the records of before, ${moved.join(', ')} lies in ${aside}, and ${left.join(', ')} still in ${folder}.`,
    `They belong together: move what lies in ${aside} back before anything opens them.`,
  ].join(' ')
}
