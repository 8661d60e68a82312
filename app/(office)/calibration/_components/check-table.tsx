import { signedDuration } from '@/lib/calibration/calibration-words'
import { FEWEST_TO_TELL } from '@/lib/calibration/forecast-check'
import { wholeNumber } from '@/lib/format/units'
import type { NamedCheck } from '@/lib/queries/calibration'

/** How well the times held, by place or by person. */
export function CheckTable({ head, rows }: { head: string; rows: readonly NamedCheck[] }) {
  return (
    <div className="calibration-table">
      <table className="table">
        <thead>
          <tr>
            <th scope="col">{head}</th>
            <th scope="col" className="right">
              P10 to P90
            </th>
            <th scope="col" className="right">
              Later than likely
            </th>
            <th scope="col" className="right">
              Middle half
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map(({ name, check }) => (
            <tr key={name}>
              <th scope="row">{name}</th>
              <td className="right num whitespace-nowrap">
                {check.inside} of {check.count}
                {check.count >= FEWEST_TO_TELL && `, ${wholeNumber((100 * check.inside) / check.count)}\u00A0%`}
                {check.count < FEWEST_TO_TELL && <span className="block text-14 text-soot">too few to tell</span>}
              </td>
              <td className="right num whitespace-nowrap">{check.biasMinutes === null ? '–' : signedDuration(check.biasMinutes)}</td>
              <td className="right num whitespace-nowrap">
                {check.middleHalf === null ? '–' : `${signedDuration(check.middleHalf[0])} to ${signedDuration(check.middleHalf[1])}`}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
