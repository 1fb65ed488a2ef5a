import type { ReactNode } from 'react'

export type PageHeadProps = {
  title: ReactNode
  /** After the title, lighter: "draft". */
  aside?: ReactNode
  /** One or two sentences under the title. */
  sub?: ReactNode
  /** To the right, before the buttons: the verdict in words and what it rests on. */
  verdict?: ReactNode
  verdictSub?: ReactNode
  /** Buttons, the main action last. */
  actions?: ReactNode
}

/** The head of a desk page. */
export function PageHead({ title, aside, sub, verdict, verdictSub, actions }: PageHeadProps) {
  return (
    <header className="mb-5 flex flex-wrap items-start justify-between gap-x-9 gap-y-3">
      <div className="min-w-0 max-w-[48rem] flex-1 basis-80">
        <h1>
          {title}
          {aside === undefined ? null : <span className="font-[380] text-soft"> {aside}</span>}
        </h1>
        {sub === undefined ? null : <div className="mt-[5px] text-soft">{sub}</div>}
      </div>
      <div className="flex flex-wrap items-start justify-end gap-x-9 gap-y-3">
        {verdict === undefined ? null : (
          <div className="max-w-[24rem] text-right">
            <p className="text-title font-[380]">{verdict}</p>
            {verdictSub === undefined ? null : <p className="mt-[5px] text-soft">{verdictSub}</p>}
          </div>
        )}
        {actions === undefined ? null : <div className="flex flex-wrap gap-2 no-print">{actions}</div>}
      </div>
    </header>
  )
}
