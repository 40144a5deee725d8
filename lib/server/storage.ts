import 'server-only';
import { Readable } from 'node:stream';
import {
  DeleteObjectCommand,
  GetObjectCommand,
  HeadObjectCommand,
  NotFound,
  PutObjectCommand,
  S3Client,
} from '@aws-sdk/client-s3';
import { Upload } from '@aws-sdk/lib-storage';
import { env } from './env';

/** Where a shop's original lies: under its own hash, so that it can never change. */
export const originalKey = (shopId: string, sha256: string) => `${shopId}/${sha256}`;
/** Where a picture derived in one analysis lies. */
export const derivedKey = (shopId: string, analysisId: string, name: string) =>
  `derived/${shopId}/${analysisId}/${name}`;

const kept = globalThis as unknown as { mendlightStore?: S3Client };

function store(): S3Client {
  const { S3_ENDPOINT, S3_REGION, S3_KEY, S3_SECRET } = env();
  kept.mendlightStore ??= new S3Client({
    region: S3_REGION,
    ...(S3_ENDPOINT ? { endpoint: S3_ENDPOINT, forcePathStyle: true } : {}),
    credentials: { accessKeyId: S3_KEY, secretAccessKey: S3_SECRET },
    // Stores that don't know the checksum trailers keep their framing as part of the object, without an error.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
  });
  return kept.mendlightStore;
}

/**
 * Stores a stream of unknown length, in parts. When the stream fails, nothing appears under the key: a checking transform
 * that throws at its end keeps wrong bytes out.
 */
export async function putStream(key: string, body: Readable, mediaType: string): Promise<void> {
  let broken: unknown;
  body.once('error', (error) => {
    broken = error;
  });
  const upload = new Upload({
    client: store(),
    params: { Bucket: env().S3_BUCKET, Key: key, Body: body, ContentType: mediaType },
    queueSize: 2,
    leavePartsOnError: false,
  });
  try {
    await upload.done();
  } catch (error) {
    // The stream's own error says more than what became of the parts.
    throw broken ?? error;
  }
}

export async function putBytes(key: string, body: Uint8Array, mediaType: string): Promise<void> {
  await store().send(
    new PutObjectCommand({ Bucket: env().S3_BUCKET, Key: key, Body: body, ContentType: mediaType }),
  );
}

export async function getStream(key: string): Promise<Readable> {
  const { Body } = await store().send(new GetObjectCommand({ Bucket: env().S3_BUCKET, Key: key }));
  if (!(Body instanceof Readable)) throw new Error(`The store sent no stream for ${key}.`);
  return Body;
}

export async function getBytes(key: string): Promise<Uint8Array<ArrayBuffer>> {
  const { Body } = await store().send(new GetObjectCommand({ Bucket: env().S3_BUCKET, Key: key }));
  if (!Body) throw new Error(`The store sent nothing for ${key}.`);
  return new Uint8Array(await Body.transformToByteArray());
}

/** Size of what lies under the key, or null. */
export async function head(key: string): Promise<{ bytes: number } | null> {
  try {
    const found = await store().send(new HeadObjectCommand({ Bucket: env().S3_BUCKET, Key: key }));
    return { bytes: found.ContentLength ?? 0 };
  } catch (error) {
    if (error instanceof NotFound) return null;
    throw error;
  }
}

/** For what an upload left behind that never became an Original. Facts are not removed. */
export async function removeUnfinished(key: string): Promise<void> {
  await store().send(new DeleteObjectCommand({ Bucket: env().S3_BUCKET, Key: key }));
}
