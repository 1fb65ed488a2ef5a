/** One line for each thing that happened, with its instant in UTC; never given a token or a code. */
export type ProgramLog = { info: (sentence: string) => void; warn: (sentence: string) => void }

/** Plain lines for standard output, which a service manager keeps. */
export function createProgramLog(print: (line: string) => void, nowMs: () => number = Date.now): ProgramLog {
  const say = (level: string) => (sentence: string) =>
    print(`${new Date(nowMs()).toISOString()} ${level} ${sentence.replace(/\s*\n\s*/g, ' ')}`)
  return { info: say('info'), warn: say('warn') }
}
