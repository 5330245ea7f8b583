import { mailEnv } from '../../db/env';
import { startMailer } from './mailer';
import { smtpSender } from './smtp';

/**
 * A process of its own: it alone knows the password of the mail server, and a mail server that is slow or away holds up
 * neither results nor live editing.
 */
const settings = mailEnv();
const mailer = await startMailer({
  databaseUrl: settings.MOTEBOOK_DATABASE_APP,
  origin: settings.NEXTAUTH_URL.replace(/\/+$/, ''),
  send: smtpSender(settings.MOTEBOOK_SMTP_URL, settings.MOTEBOOK_MAIL_FROM),
});
console.log('mail is sent from the outbox');

let stopping = false;
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.on(signal, () => {
    if (stopping) return;
    stopping = true;
    mailer.stop().then(
      () => process.exit(0),
      (error: unknown) => {
        console.error(error);
        process.exit(1);
      },
    );
  });
}
