import type { PhotoKind } from '@/lib/firings/photo-kinds'
import type { PhotoDto } from '@/lib/firings/photo-schema'
import { ApiProblem, apiPath } from '@/lib/http/api-client'

export type PhotoToSend = { id: string; file: Blob; kind: PhotoKind; caption: string }

/**
 * Sends a picture as the body of a request, and says how much of it has gone: a fetch cannot tell.
 * @throws ApiProblem for every answer that is no success, and when there is none
 */
export function sendPhoto(
  firingId: string,
  { id, file, kind, caption }: PhotoToSend,
  onShare: (share: number) => void,
): Promise<PhotoDto> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest()
    request.open('POST', apiPath('/api/firings/{id}/photos', { id: firingId }, { id, kind, caption }))
    request.setRequestHeader('accept', 'application/json, application/problem+json')
    request.responseType = 'json'
    request.upload.onprogress = ({ loaded, total }) => onShare(total === 0 ? 0 : loaded / total)
    request.onload = () => {
      if (request.status === 201) resolve(trustPhoto(request.response))
      else reject(problemOf(request.status, request.response))
    }
    request.onerror = () => reject(problemOf(0, null))
    request.onabort = () => reject(problemOf(0, null))
    request.send(file)
  })
}

/** The parsed boundary: the answer of our own server, of the same build. */
function trustPhoto(body: unknown): PhotoDto {
  return body as PhotoDto
}

function problemOf(status: number, body: unknown): ApiProblem {
  const read = (key: string): unknown =>
    typeof body === 'object' && body !== null ? Reflect.get(body, key) : undefined
  const [title, detail, photo] = [read('title'), read('detail'), Reflect.get(Object(read('fields')), 'photo')]
  return new ApiProblem({
    title: typeof title === 'string' ? title : 'The photo was not sent',
    status,
    detail:
      typeof photo === 'string'
        ? photo
        : typeof detail === 'string'
          ? detail
          : 'The server did not answer. The photo is kept here: send it again.',
    fields: {},
    current: undefined,
    retryAfterS: null,
  })
}
