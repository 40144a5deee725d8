import 'server-only';
import type { z } from 'zod';
import type { Actor } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import { demand, type Permission } from './access';
import { problemResponse } from './problem';
import { actorOf } from './session';

/** Largest JSON body, in bytes; photographs go through the upload route, which reads its own stream. */
const maxJson = 1_000_000;

type Access = 'public' | 'signed-in' | Permission;
type Parsed<S> = S extends z.ZodType ? z.output<S> : undefined;

export interface Call<A extends Access, I, Q> {
  actor: A extends 'public' ? null : Actor;
  input: Parsed<I>;
  query: Parsed<Q>;
  params: Params;
  request: Request;
}

interface Options<A extends Access, I, Q> {
  access: A;
  input?: I;
  query?: Q;
  /** Status of a plain answer; 200, or 204 when the verb returns nothing. */
  status?: number;
}

/** Every name that a folder in brackets has; a handler reads those of its own path. */
type Params = Record<'tag' | 'id' | 'slug' | 'name' | 'token' | 'sha256', string>;
type Context = { params: Promise<Record<string, string>> };
export type Handler = (request: Request, context: Context) => Promise<Response>;

/** Makes a route handler: checks origin, session and permission, parses, calls the verb, answers in JSON, and turns every throw into a problem. */
export function route<
  A extends Access,
  I extends z.ZodType | undefined = undefined,
  Q extends z.ZodType | undefined = undefined,
>(options: Options<A, I, Q>, verb: (call: Call<A, I, Q>) => unknown): Handler {
  return async (request, context) => {
    try {
      refuseForeign(request);
      const actor = options.access === 'public' ? null : await admit(request, options.access);
      const answer = await verb({
        actor: actor as Call<A, I, Q>['actor'],
        input: options.input ? options.input.parse(await jsonOf(request)) : undefined,
        query: options.query ? options.query.parse(queryOf(request)) : undefined,
        params: (await context.params) as Params,
        request,
      } as Call<A, I, Q>);
      return responseOf(answer, options.status);
    } catch (error) {
      return problemResponse(error);
    }
  };
}

async function admit(request: Request, access: Exclude<Access, 'public'>): Promise<Actor> {
  const actor = await actorOf(request.headers.get('cookie'));
  if (!actor) throw new UserError('unauthorized', 'Sign in to go on.');
  if (access !== 'signed-in') demand(actor, access);
  return actor;
}

function responseOf(answer: unknown, status?: number): Response {
  if (answer instanceof Response) return answer;
  const headers = { 'cache-control': 'no-store' };
  if (answer === undefined) return new Response(null, { status: 204, headers });
  return Response.json(answer, { status: status ?? 200, headers });
}

/**
 * Cross-site request forgery: a browser names where a request comes from. One without either header is no browser's,
 * and so carries no cookies that its user did not put there.
 */
function refuseForeign(request: Request): void {
  if (['GET', 'HEAD', 'OPTIONS'].includes(request.method)) return;
  const site = request.headers.get('sec-fetch-site');
  const origin = request.headers.get('origin');
  const host = request.headers.get('host') ?? new URL(request.url).host;
  const foreign = site ? site !== 'same-origin' : origin !== null && hostOf(origin) !== host;
  if (foreign)
    throw new UserError('forbidden', 'This request came from another site and was refused.');
}

const hostOf = (origin: string) => (URL.canParse(origin) ? new URL(origin).host : null);

async function jsonOf(request: Request): Promise<unknown> {
  const text = await request.text();
  if (text.length > maxJson) throw new UserError('tooLarge', 'Send at most one megabyte of JSON.');
  if (text === '') return {};
  try {
    return JSON.parse(text);
  } catch {
    throw new UserError('invalid', 'The request’s body is not valid JSON.');
  }
}

const queryOf = (request: Request) => Object.fromEntries(new URL(request.url).searchParams);
