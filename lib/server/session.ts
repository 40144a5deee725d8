import 'server-only';
import { cookies } from 'next/headers';
import { redirect } from 'next/navigation';
import type { NextAuthOptions } from 'next-auth';
import { decode } from 'next-auth/jwt';
import CredentialsProvider from 'next-auth/providers/credentials';
import { cache } from 'react';
import type { Actor } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import { signInSchema } from '@/lib/shared/schemas';
import { change, record, type Who } from './audit';
import { db } from './db';
import { env } from './env';
import { limit } from './limits';
import { verifyPassword } from './passwords';
import { problemOf } from './problem';

declare module 'next-auth' {
  interface User {
    sessionId: string;
  }
}
declare module 'next-auth/jwt' {
  interface JWT {
    sessionId?: string;
  }
}

const day = 24 * 60 * 60;
const sessionSeconds = 30 * day;
/** How stale "last seen" may be before a request writes it anew. */
const seenEvery = 60_000;
const secure = () => env().APP_URL.startsWith('https:');
export const cookieName = () => (secure() ? '__Host-mendlight' : 'mendlight');

/** The JWT carries nothing but the id of a `Session` row, which every request reads: roles and endings hold at once. */
export function authOptions(): NextAuthOptions {
  return {
    secret: env().AUTH_SECRET,
    session: { strategy: 'jwt', maxAge: sessionSeconds },
    pages: { signIn: '/sign-in', error: '/sign-in' },
    cookies: {
      sessionToken: {
        name: cookieName(),
        options: { httpOnly: true, sameSite: 'lax', path: '/', secure: secure() },
      },
    },
    providers: [
      CredentialsProvider({
        credentials: { email: {}, password: {} },
        // next-auth hands a thrown message to the sign-in form.
        authorize: (credentials, request) =>
          signIn(credentials ?? {}, String(request.headers?.['user-agent'] ?? '')).catch(
            (error) => {
              throw new Error(problemOf(error).detail);
            },
          ),
      }),
    ],
    callbacks: {
      jwt: ({ token, user }) => (user ? { sessionId: user.sessionId } : token),
      session: async ({ session, token }) => {
        const actor = await actorOfSession(token.sessionId);
        return { expires: session.expires, user: actor ? { name: actor.name } : undefined };
      },
    },
    events: { signOut: ({ token }) => end(token?.sessionId) },
  };
}

/** Checks e-mail and password and opens a session in the person's first shop. */
export async function signIn(credentials: object, userAgent: string) {
  const { email, password } = signInSchema.parse({
    email: 'email' in credentials ? credentials.email : '',
    password: 'password' in credentials ? credentials.password : '',
  });
  const forget = await limit(`sign-in:${email}`, 10, 15);
  const user = await db().User.findOne({ where: { email } });
  const right = await verifyPassword(user?.passwordHash, password);
  const membership =
    user &&
    (await db().Membership.findOne({
      where: { userId: user.id, active: true },
      order: [['createdAt', 'ASC']],
    }));
  if (!right || !user || !membership) {
    throw new UserError('unauthorized', 'The e-mail address or the password is wrong.');
  }
  await forget();
  const sessionId = await openSession({ userId: user.id, shopId: membership.shopId }, userAgent);
  return { id: user.id, sessionId };
}

function openSession(who: Who, userAgent: string): Promise<string> {
  return change(who, async (transaction) => {
    const session = await db().Session.create(
      {
        ...who,
        userAgent: userAgent.slice(0, 400),
        expiresAt: new Date(Date.now() + sessionSeconds * 1000),
      },
      { transaction },
    );
    await record(transaction, who, 'session.start', ['Session', session.id]);
    return session.id;
  });
}

/** Who is behind a request's cookies, or null; reads the database each time. */
export async function actorOf(cookieHeader: string | null): Promise<Actor | null> {
  const name = `${cookieName()}=`;
  const pair = (cookieHeader ?? '').split(/;\s*/).find((part) => part.startsWith(name));
  return pair ? actorOfToken(decodeURIComponent(pair.slice(name.length))) : null;
}

/** The signed-in person for pages, once a request. */
export const currentActor = cache(async (): Promise<Actor | null> => {
  const token = (await cookies()).get(cookieName())?.value;
  return token ? actorOfToken(token) : null;
});

/** The signed-in person, or off to the sign-in page. */
export async function requireActor(): Promise<Actor> {
  return (await currentActor()) ?? redirect('/sign-in');
}

async function actorOfToken(token: string): Promise<Actor | null> {
  const claims = await decode({ token, secret: env().AUTH_SECRET }).catch(() => null);
  return actorOfSession(claims?.sessionId);
}

async function actorOfSession(id: string | undefined): Promise<Actor | null> {
  const { Session, Membership } = db();
  const session = id && (await Session.findByPk(id, { include: ['user', 'shop'] }));
  if (!session || session.endedAt || session.expiresAt < new Date()) return null;
  const { user, shop, shopId } = session;
  const membership = await Membership.findOne({
    where: { shopId, userId: session.userId, active: true },
  });
  if (!user || !shop || !membership) return null;
  if (Date.now() - session.seenAt.getTime() > seenEvery) {
    await session.update({ seenAt: new Date() });
  }
  return {
    userId: user.id,
    sessionId: session.id,
    shopId,
    shopName: shop.name,
    currency: shop.currency,
    role: membership.role,
    name: user.name,
    email: user.email,
  };
}

async function end(id: string | undefined): Promise<void> {
  if (id) await db().Session.update({ endedAt: new Date() }, { where: { id, endedAt: null } });
}
