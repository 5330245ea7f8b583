import { readSettings } from '../../../db/env';
import { startMailService } from './mail-service';

const settings = readSettings();
const folder = process.env.MOTEBOOK_MAIL_FOLDER;
if (!folder) throw new Error('The local mail server needs MOTEBOOK_MAIL_FOLDER.');
const service = await startMailService({ port: settings.MOTEBOOK_SMTP_PORT, folder });
console.log(`local mail server listens on port ${service.port}`);
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.on(signal, () => void service.stop().then(() => process.exit(0)));
}
