export type CsvFile = { fileName: string; rows: AsyncIterable<string> | Iterable<string> }

/** A field of CSV (RFC 4180), never one that a spreadsheet would take for a formula. */
export function csvField(value: string | number | null): string {
  if (value === null) return ''
  if (typeof value === 'number') return String(value)
  const safe = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}

/** One line of CSV with its line end. */
export function csvLine(values: readonly (string | number | null)[]): string {
  return `${values.map(csvField).join(',')}\r\n`
}

/** Streams the file as a download, a chunk of lines at a time. */
export function csvResponse(file: CsvFile): Response {
  const encoder = new TextEncoder()
  const lines =
    Symbol.asyncIterator in file.rows ? file.rows[Symbol.asyncIterator]() : file.rows[Symbol.iterator]()
  const body = new ReadableStream<Uint8Array>({
    async pull(controller) {
      let chunk = ''
      while (chunk.length < 64 * 1024) {
        const next = await lines.next()
        if (next.done === true) {
          if (chunk !== '') controller.enqueue(encoder.encode(chunk))
          controller.close()
          return
        }
        chunk += next.value
      }
      controller.enqueue(encoder.encode(chunk))
    },
  })
  return new Response(body, {
    headers: {
      'content-type': 'text/csv; charset=utf-8; header=present',
      'content-disposition': `attachment; filename="${file.fileName.replaceAll(/[^\w.-]/g, '-')}"`,
      'cache-control': 'no-store',
    },
  })
}
