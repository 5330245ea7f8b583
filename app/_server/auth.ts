import 'server-only';
import type { NextAuthOptions } from 'next-auth';
import Credentials from 'next-auth/providers/credentials';
import { db } from '@/db/client';
import { endLogin } from '@/db/commands/login/end-login';
import { startLogin } from '@/db/commands/login/start-login';
import { env } from '@/db/env';
import { LOGIN_TOTAL_HOURS, sessionCookieName } from '@/db/session-cookie';

declare module 'next-auth' {
  interface User {
    loginId: string;
  }
  interface Session {
    loginId: string | null;
  }
}

declare module 'next-auth/jwt' {
  interface JWT {
    loginId?: string;
  }
}

const maxAge = LOGIN_TOTAL_HOURS * 3600;

/** Sign-in by name and password. The token only names a login row; `currentActor` asks the database about it each time. */
export function authOptions(): NextAuthOptions {
  const secure = env().NEXTAUTH_URL.startsWith('https:');
  return {
    secret: env().NEXTAUTH_SECRET,
    session: { strategy: 'jwt', maxAge },
    // Without this the token would outlive its cookie by a month.
    jwt: { maxAge },
    pages: { signIn: '/sign-in', error: '/sign-in' },
    cookies: {
      sessionToken: {
        name: sessionCookieName(env().NEXTAUTH_URL),
        options: { httpOnly: true, sameSite: 'lax', path: '/', secure },
      },
    },
    providers: [
      Credentials({
        credentials: {
          name: { label: 'Login name or e-mail' },
          password: { label: 'Password', type: 'password' },
        },
        async authorize(given, request) {
          const name = given?.name;
          const password = given?.password;
          if (typeof name !== 'string' || typeof password !== 'string' || name === '' || password === '')
            return null;
          const agent: unknown = request.headers?.['user-agent'];
          const started = await startLogin(db(), {
            name,
            password,
            userAgent: typeof agent === 'string' ? agent : '',
          });
          return started && { id: started.personId, loginId: started.loginId };
        },
      }),
    ],
    callbacks: {
      jwt({ token, user }) {
        // Names and addresses stay out of the cookie: the login row leads to them.
        return user ? { sub: user.id, loginId: user.loginId } : token;
      },
      session({ session, token }) {
        return { expires: session.expires, loginId: token.loginId ?? null };
      },
    },
    events: {
      async signOut({ token }) {
        if (token?.loginId) await endLogin(db(), token.loginId);
      },
    },
  };
}
