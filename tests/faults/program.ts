// The whole gateway program, which does not outlive the suite that started it.
process.on('disconnect', () => process.exit(0))
await import('@/lib/gateway/main')

export {}
