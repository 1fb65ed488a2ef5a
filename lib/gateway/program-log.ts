/** One line for each thing that happened, with its instant in UTC; never given a token or a code. */
export type ProgramLog = { info: (sentence: string) => void; warn: (sentence: string) => void }

/** Plain lines on standard output, which a service manager keeps. */
export function createProgramLog(
  write: (line: string) => void = (line) => void process.stdout.write(line),
  nowMs: () => number = Date.now,
): ProgramLog {
  const say = (level: string) => (sentence: string) =>
    write(`${new Date(nowMs()).toISOString()} ${level} ${sentence.replace(/\s*\n\s*/g, ' ')}\n`)
  return { info: say('info'), warn: say('warn') }
}
