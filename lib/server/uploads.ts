import 'server-only';
import { createHash } from 'node:crypto';
import { Readable, Transform } from 'node:stream';
import type { ReadableStream as NodeWebStream } from 'node:stream/web';
import type { Actor } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { Original } from '@/models/testing';
import { demand, inShop } from './access';
import { db } from './db';
import { magicLength, mediaTypeOf } from './picture-kinds';
import { originalKey, putStream } from './storage';

export const largestOriginal = 100 * 1024 * 1024;

/** The shop's original with this hash, or null. */
export async function findOriginal(actor: Actor, sha256: string): Promise<Original | null> {
  demand(actor, 'shot.add');
  return db().Original.findOne({ where: inShop(actor, { sha256 }) });
}

/** Answers HEAD: a file that the shop has needs no sending. */
export async function knowsOriginal(actor: Actor, sha256: string): Promise<Response> {
  const known = await findOriginal(actor, sha256);
  return new Response(null, {
    status: known ? 200 : 404,
    headers: { 'cache-control': 'no-store' },
  });
}

/**
 * Streams a request's body into the store under its hash. The hash, the length and the kind are checked on the way, and the
 * stream fails at its end if any is wrong, so that nothing appears under the key. The same bytes again change nothing.
 */
export async function receiveOriginal(
  actor: Actor,
  sha256: string,
  request: Request,
): Promise<{ sha256: string; bytes: number; mediaType: string }> {
  const known = await findOriginal(actor, sha256);
  if (known) return original(known);
  if (!/^[0-9a-f]{64}$/.test(sha256)) {
    throw new UserError('invalid', 'The address must end in the file’s SHA-256.');
  }
  const declared = declaredLength(request);
  if (!request.body || declared === 0) {
    throw new UserError('invalid', 'The file is empty: copy it from the card again.');
  }
  const body = Readable.fromWeb(request.body as NodeWebStream);
  const first = await firstBytes(body, magicLength);
  const mediaType = mediaTypeOf(first);
  const key = originalKey(actor.shopId, sha256);
  const check = checking(sha256, declared);
  body.on('error', (error) => check.destroy(error));
  await putStream(key, body.pipe(check), mediaType).catch((error) => {
    body.destroy();
    throw check.refusal ?? (body.errored ? interrupted() : error);
  });
  const [row] = await db().Original.findOrCreate({
    where: inShop(actor, { sha256 }),
    defaults: {
      ...inShop(actor, { sha256, mediaType, key }),
      bytes: check.count,
      addedById: actor.userId,
    },
  });
  return original(row);
}

const original = ({ sha256, bytes, mediaType }: Original) => ({ sha256, bytes, mediaType });

function declaredLength(request: Request): number | null {
  const header = request.headers.get('content-length');
  const length = header === null ? null : Number(header);
  if (length !== null && length > largestOriginal) throw tooLarge();
  return length;
}

const tooLarge = () => new UserError('tooLarge', 'A photograph may have at most 100 MB.');
const interrupted = () => new UserError('invalid', 'The upload broke off. Send the file again.');

/** Waits for the first bytes and puts them back. */
async function firstBytes(stream: Readable, length: number): Promise<Uint8Array> {
  const chunks: Buffer[] = [];
  let have = 0;
  while (have < length) {
    const chunk: Buffer | null = stream.read();
    if (chunk) {
      chunks.push(chunk);
      have += chunk.length;
    } else if (stream.readableEnded || !(await more(stream))) break;
  }
  const start = Buffer.concat(chunks);
  if (start.length > 0) stream.unshift(start);
  return new Uint8Array(start.subarray(0, length));
}

function more(stream: Readable): Promise<boolean> {
  return new Promise((resolve, reject) => {
    const settle = (act: () => void) => () => {
      stream.off('readable', readable).off('end', end).off('error', error);
      act();
    };
    const readable = settle(() => resolve(true));
    const end = settle(() => resolve(false));
    const error = settle(() => reject(interrupted()));
    stream.once('readable', readable).once('end', end).once('error', error);
  });
}

class Checking extends Transform {
  count = 0;
  refusal: UserError | null = null;
}

function checking(sha256: string, declared: number | null): Checking {
  const hash = createHash('sha256');
  const refuse = (error: UserError) => {
    check.refusal = error;
    return error;
  };
  const check: Checking = new Checking({
    transform(chunk: Buffer, _encoding, done) {
      check.count += chunk.length;
      if (check.count > largestOriginal) return done(refuse(tooLarge()));
      hash.update(chunk);
      done(null, chunk);
    },
    flush(done) {
      if (declared !== null && check.count !== declared) {
        return done(
          refuse(
            new UserError(
              'invalid',
              `${check.count} of ${declared} bytes arrived. Send the file again.`,
            ),
          ),
        );
      }
      if (hash.digest('hex') === sha256) return done();
      done(
        refuse(
          new UserError(
            'invalid',
            'The bytes that arrived are not those that were announced. Send the file again.',
          ),
        ),
      );
    },
  });
  return check;
}
