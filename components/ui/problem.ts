/** What a refused request says to a person: the readable part of an RFC 9457 problem. */
export type Problem = {
  title?: string
  detail?: string
  /** Field path → what is wrong and how to mend it. */
  fields?: Readonly<Record<string, string>>
}
