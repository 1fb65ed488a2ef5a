import { runCommand } from './command'

// Whoever reads the output may stop reading; the work goes on.
for (const stream of [process.stdout, process.stderr]) stream.on('error', () => {})

process.exit(
  await runCommand(process.argv.slice(2), {
    print: (text) => void process.stdout.write(`${text}\n`),
    printError: (text) => void process.stderr.write(`${text}\n`),
    untilEnded: () =>
      new Promise<void>((resolve) => {
        for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, () => resolve())
      }),
  }),
)
