import { readSettings } from '../../../db/env';
import { startFileService } from './file-service';

const settings = readSettings();
const token = process.env.UPLOADTHING_TOKEN;
const folder = process.env.MOTEBOOK_FILES_FOLDER;
if (!token || !folder)
  throw new Error('The local file service needs UPLOADTHING_TOKEN and MOTEBOOK_FILES_FOLDER.');
const { apiKey, appId } = JSON.parse(Buffer.from(token, 'base64').toString('utf8')) as {
  apiKey: string;
  appId: string;
};

const service = await startFileService({ port: settings.MOTEBOOK_FILES_PORT, folder, apiKey, appId });
console.log(`local file service listens on port ${service.port}`);
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.on(signal, () => void service.stop().then(() => process.exit(0)));
}
