import 'server-only';
import { Readable } from 'node:stream';
import { getStream } from './storage';

/** Answers with a picture from the store; a browser that has it already gets 304. */
export async function storedPicture(
  request: Request,
  picture: { key: string; mediaType: string },
  etag: string,
  cacheControl: string,
): Promise<Response> {
  const headers = {
    etag,
    'cache-control': cacheControl,
    'content-type': picture.mediaType,
    'x-content-type-options': 'nosniff',
  };
  if (request.headers.get('if-none-match') === etag) {
    return new Response(null, { status: 304, headers });
  }
  const body = Readable.toWeb(await getStream(picture.key)) as ReadableStream<Uint8Array>;
  return new Response(body, { headers });
}
