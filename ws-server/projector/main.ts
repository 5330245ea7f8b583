import { projectorEnv } from '../../db/env';
import { openStoredFile } from '../../db/files/open-stored-file';
import { whenReachable } from '../../db/when-reachable';
import { startProjector } from './projector';

const settings = projectorEnv();
const access = { cacheFolder: settings.MOTEBOOK_CACHE, token: settings.UPLOADTHING_TOKEN };
const projector = await whenReachable(
  () =>
    startProjector({
      databaseUrl: settings.MOTEBOOK_DATABASE_APP,
      openFile: (file) => openStoredFile(file, access),
    }),
  (error) => console.error(`projector, the database is away: ${(error as Error).message}`),
);
console.log('projector follows committed updates');

let stopping = false;
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.on(signal, () => {
    if (stopping) return;
    stopping = true;
    projector.stop().then(
      () => process.exit(0),
      (error: unknown) => {
        console.error(error);
        process.exit(1);
      },
    );
  });
}
