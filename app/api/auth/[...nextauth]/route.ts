import NextAuth from 'next-auth';
import { authOptions } from '@/app/_server/auth';
import { countSignIn } from '@/app/_server/count-sign-in';

// The options are read at each request: a build has no environment to check.
type Handler = (request: Request, context: unknown) => Promise<Response>;
const handler = countSignIn((request, context) =>
  (NextAuth(authOptions()) as unknown as Handler)(request, context),
);

export { handler as GET, handler as POST };
