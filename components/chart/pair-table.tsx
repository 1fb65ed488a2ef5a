import { formatClock } from '@/lib/format'
import type { PairModel } from './pair-model'
import { tabulatePair } from './pair-words'

/** The picture as rows of words, read out but not shown. */
export function PairTable({ model }: { model: PairModel }) {
  const { heads, rows } = tabulatePair(model)
  return (
    <div className="sr-only">
      <table>
        <caption>{model.title}, every five minutes</caption>
        <thead>
          <tr>
            {heads.map((head, i) => (
              <th key={`${head}-${i}`} scope="col">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.time}>
              <th scope="row">{row.time}</th>
              <td>{row.plan}</td>
              {row.temps.map((temp, i) => (
                <td key={i}>{temp}</td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
      {model.marks.length === 0 ? null : (
        <ul aria-label="Marks">
          {model.marks.map((mark, i) => (
            <li key={i}>
              {formatClock(mark.timeS)} {mark.words}
            </li>
          ))}
        </ul>
      )}
    </div>
  )
}
