import { DeleteObjectCommand, GetObjectCommand, PutObjectCommand, S3Client } from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import { env } from '@/lib/env'
import { AppError } from '@/lib/errors'
import { log } from '@/lib/log'
import { shared } from '@/lib/runtime'

/** How long a signed address of a stored file serves, s: it is fetched at once, by this server alone. */
const SIGNED_FOR_S = 60

type Store = { client: S3Client; bucket: string }

/** @throws AppError 'unavailable' where no object storage is set up */
function store(): Store {
  const { S3_ENDPOINT, S3_REGION, S3_BUCKET, S3_ACCESS_KEY_ID, S3_SECRET_ACCESS_KEY } = env()
  if (!S3_ENDPOINT || !S3_BUCKET || !S3_ACCESS_KEY_ID || !S3_SECRET_ACCESS_KEY) {
    throw new AppError('unavailable', 'No store for photos is set up here. Tell your administrator.')
  }
  return shared(`files ${S3_ENDPOINT} ${S3_BUCKET} ${S3_ACCESS_KEY_ID}`, () => ({
    bucket: S3_BUCKET,
    client: new S3Client({
      endpoint: S3_ENDPOINT,
      region: S3_REGION,
      credentials: { accessKeyId: S3_ACCESS_KEY_ID, secretAccessKey: S3_SECRET_ACCESS_KEY },
      // By path, as every S3-compatible storage takes it; and without checksums that some of them do not know.
      forcePathStyle: true,
      requestChecksumCalculation: 'WHEN_REQUIRED',
      responseChecksumValidation: 'WHEN_REQUIRED',
      maxAttempts: 2,
      requestHandler: { connectionTimeout: 3_000, requestTimeout: 15_000 },
    }),
  }))
}

/** Puts a file, whole. @throws AppError 'unavailable' when the storage does not take it */
export async function putFile(key: string, bytes: Buffer, contentType: string): Promise<void> {
  await asked('put', key, ({ client, bucket }) =>
    client.send(
      new PutObjectCommand({
        Bucket: bucket,
        Key: key,
        Body: bytes,
        ContentLength: bytes.byteLength,
        ContentType: contentType,
      }),
    ),
  )
}

/** Removes a file; one that is not there is no error. @throws AppError 'unavailable' */
export async function removeFile(key: string): Promise<void> {
  await asked('remove', key, ({ client, bucket }) =>
    client.send(new DeleteObjectCommand({ Bucket: bucket, Key: key })),
  )
}

/** An address of the storage that opens this one file to whoever holds it, for a minute. @throws AppError 'unavailable' */
export async function signedAddress(key: string): Promise<string> {
  return asked('sign', key, ({ client, bucket }) =>
    getSignedUrl(client, new GetObjectCommand({ Bucket: bucket, Key: key }), { expiresIn: SIGNED_FOR_S }),
  )
}

/** A file's bytes as a stream, fetched by its signed address. @throws AppError 'unavailable', also when it is gone */
export async function openFile(key: string): Promise<ReadableStream<Uint8Array>> {
  return asked('open', key, async () => {
    const answer = await fetch(await signedAddress(key), {
      signal: AbortSignal.timeout(15_000),
      cache: 'no-store',
    })
    if (answer.ok && answer.body !== null) return answer.body
    await answer.body?.cancel()
    throw new Error(`the storage answered ${answer.status}`)
  })
}

async function asked<T>(what: string, key: string, work: (store: Store) => Promise<T>): Promise<T> {
  const ready = store()
  try {
    return await work(ready)
  } catch (error) {
    log().error({ err: error, what, key }, 'the storage for files did not do what it was asked')
    throw new AppError('unavailable', 'The store for photos does not answer. Try again in a moment.', {
      retryAfterS: 10,
    })
  }
}
