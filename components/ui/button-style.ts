import { classNames } from './class-names'

/**
 * - `plain`: any action.
 * - `main`: the page's one main action, outlined in water until it is due.
 * - `due`: the same, filled, when it is due.
 * - `danger`: takes something away; outlined in red, and asked again by a dialog.
 * - `quiet`: an action inside a line of text or a table row.
 */
export type ButtonKind = 'plain' | 'main' | 'due' | 'danger' | 'quiet'

const kinds: Record<ButtonKind, string> = {
  plain: 'control px-[13px] text-text hover:bg-wash',
  main: 'control px-[13px] border-water! text-water font-[600] hover:bg-wash disabled:border-line! disabled:text-mute',
  due: 'control px-[13px] border-water! bg-water! text-on-water font-[600] hover:brightness-110 disabled:border-line! disabled:bg-ground! disabled:text-mute',
  danger:
    'control px-[13px] border-red! text-red font-[600] hover:bg-wash disabled:border-line! disabled:text-mute',
  quiet:
    'text-water font-[600] hover:underline underline-offset-3 disabled:text-mute disabled:no-underline min-h-6',
}

export function buttonClass(kind: ButtonKind, more?: string): string {
  return classNames(
    'inline-flex items-center justify-center gap-2 text-center leading-tight select-none',
    kinds[kind],
    more,
  )
}
