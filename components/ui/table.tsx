import Link from 'next/link'
import type { ReactNode } from 'react'
import { classNames } from './class-names'
import type { Sort } from './url-query'

export type Column<Row> = {
  key: string
  head: ReactNode
  /** Stands in the head, soft, after the name: "min", "°C". */
  unit?: ReactNode
  /** Numbers stand right and in tabular figures. */
  isNumeric?: boolean
  /** The head is a link that sorts by this key; leave out where sorting makes no sense. */
  sortKey?: string
  /** The cell names its row (th scope=row). */
  isRowHead?: boolean
  cell: (row: Row) => ReactNode
  className?: string
}

export type TableProps<Row> = {
  /** What the table holds; read out, and shown when `isCaptionShown`. */
  caption: string
  isCaptionShown?: boolean
  columns: readonly Column<Row>[]
  rows: readonly Row[]
  rowKey: (row: Row) => string
  sort?: Sort
  /** The address that sorts by a column; made with changeQuery so that search and filters stay. */
  sortHref?: (sort: Sort) => string
  isRowSelected?: (row: Row) => boolean
  /** Shown in place of the table when there are no rows; use EmptyState. */
  empty?: ReactNode
}

/** A table ruled by hairlines. Sorting is by links, so that it lives in the URL. */
export function Table<Row>({
  caption,
  isCaptionShown = false,
  columns,
  rows,
  rowKey,
  sort,
  sortHref,
  isRowSelected,
  empty,
}: TableProps<Row>) {
  if (rows.length === 0 && empty !== undefined) return <>{empty}</>
  return (
    <div className="relative overflow-x-auto" role="region" aria-label={caption} tabIndex={0}>
      <table
        className="group w-full border-collapse"
        data-inset={isRowSelected === undefined ? undefined : true}
      >
        <caption className={isCaptionShown ? 'mb-1 text-left font-[640]' : 'sr-only'}>{caption}</caption>
        <thead>
          <tr className="border-b border-line">
            {columns.map((column) => (
              <HeadCell key={column.key} column={column} sort={sort} sortHref={sortHref} />
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => {
            const isSelected = isRowSelected?.(row) ?? false
            return (
              <tr
                key={rowKey(row)}
                className={classNames(
                  'border-b border-line',
                  isSelected && 'bg-wash shadow-[inset_3px_0_0_var(--water)]',
                )}
              >
                {columns.map((column) => (
                  <BodyCell key={column.key} column={column} row={row} />
                ))}
              </tr>
            )
          })}
        </tbody>
      </table>
    </div>
  )
}

/** A table whose rows can be chosen is inset, so that the mark of the chosen row stands clear of its words. */
const cellClass = 'py-[5.5px] pr-5 last:pr-[10px] group-data-inset:first:pl-[10px] align-top'

function BodyCell<Row>({ column, row }: { column: Column<Row>; row: Row }) {
  const className = classNames(
    cellClass,
    column.isNumeric && 'text-right whitespace-nowrap',
    column.className,
  )
  if (!column.isRowHead) return <td className={className}>{column.cell(row)}</td>
  return (
    <th scope="row" className={classNames(className, !column.isNumeric && 'text-left', 'font-normal')}>
      {column.cell(row)}
    </th>
  )
}

function HeadCell<Row>({
  column,
  sort,
  sortHref,
}: {
  column: Column<Row>
  sort?: Sort
  sortHref?: (sort: Sort) => string
}) {
  const className = classNames(
    cellClass,
    'text-small font-normal text-soft',
    column.isNumeric ? 'text-right' : 'text-left',
  )
  const name = (
    <>
      {column.head}
      {column.unit === undefined ? null : <span className="text-mute"> {column.unit}</span>}
    </>
  )
  if (column.sortKey === undefined || sortHref === undefined) {
    return (
      <th scope="col" className={className}>
        {name}
      </th>
    )
  }
  const direction = sort?.key === column.sortKey ? sort.direction : null
  const next: Sort = { key: column.sortKey, direction: direction === 'asc' ? 'desc' : 'asc' }
  return (
    <th
      scope="col"
      className={className}
      aria-sort={direction === null ? undefined : direction === 'asc' ? 'ascending' : 'descending'}
    >
      <Link
        href={sortHref(next)}
        scroll={false}
        className={classNames(
          'inline-flex items-baseline gap-1 hover:underline underline-offset-3',
          direction !== null && 'font-[640] text-text',
        )}
      >
        {column.isNumeric ? <SortMark direction={direction} /> : null}
        <span>{name}</span>
        {column.isNumeric ? null : <SortMark direction={direction} />}
      </Link>
    </th>
  )
}

/** A drawn triangle, because the typeface has no arrows. Space is kept for it, so that heads do not jump. */
function SortMark({ direction }: { direction: 'asc' | 'desc' | null }) {
  return (
    <svg
      width="8"
      height="7"
      viewBox="0 0 8 7"
      aria-hidden="true"
      className={direction === null ? 'invisible' : 'fill-current'}
    >
      <path d={direction === 'desc' ? 'M0 1h8L4 7z' : 'M0 7h8L4 1z'} />
    </svg>
  )
}
