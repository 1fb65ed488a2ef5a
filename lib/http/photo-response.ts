/**
 * A picture through our own address, which has asked who wants it. It shows in an <img>, which takes no notice of the
 * disposition; opened by itself it is a download and never a page of ours. Kept by that browser alone, for a while.
 */
export function photoResponse(photo: { fileName: string; body: ReadableStream<Uint8Array> }): Response {
  return new Response(photo.body, {
    headers: {
      'content-type': 'image/jpeg',
      'content-disposition': `attachment; filename="${photo.fileName.replaceAll(/[^\w.-]/g, '-')}"`,
      'cache-control': 'private, max-age=300',
      'x-content-type-options': 'nosniff',
    },
  })
}
