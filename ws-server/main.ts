import { wsEnv } from '../db/env';
import { startServer } from './server';

const settings = wsEnv();
const server = await startServer({
  port: settings.MOTEBOOK_WS_PORT,
  databaseUrl: settings.MOTEBOOK_DATABASE_WS,
  publicUrl: settings.NEXTAUTH_URL,
  secret: settings.NEXTAUTH_SECRET,
});
console.log(`websocket server listens on port ${server.port}`);

let stopping = false;
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.on(signal, () => {
    if (stopping) return;
    stopping = true;
    server.stop().then(
      () => process.exit(0),
      (error: unknown) => {
        console.error(error);
        process.exit(1);
      },
    );
  });
}
