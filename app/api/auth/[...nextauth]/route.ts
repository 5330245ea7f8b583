import NextAuth from 'next-auth';
import { authOptions } from '@/app/_server/auth';

// The options are read at each request: a build has no environment to check.
type Handler = (request: Request, context: unknown) => Promise<Response>;
const handler: Handler = (request, context) =>
  (NextAuth(authOptions()) as unknown as Handler)(request, context);

export { handler as GET, handler as POST };
