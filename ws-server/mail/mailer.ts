import pg from 'pg';
import PgBoss from 'pg-boss';
import { connect } from '../../db/client';
import { deliver, type SendMail } from '../../db/mail/deliver';

const SCHEMA = 'queue';
const QUEUE = 'mail';
/** Looked at this often even when nothing was announced: an announcement is lost while the connection is. */
const LOOK_EVERY_MS = 5_000;
const RECONNECT_MS = 500;

export interface Mailer {
  stop(): Promise<void>;
}

/**
 * Takes letters from the outbox into the queue and sends them, each until a mail server took it. The queue's pauses grow;
 * several of these processes share the work.
 * @param options.pauseSeconds - first pause before a letter is tried again.
 * @param options.pollSeconds - how often the queue is asked for work.
 * @throws when the database is away, or its migrations are those of another version.
 */
export async function startMailer(options: {
  databaseUrl: string;
  origin: string;
  send: SendMail;
  pauseSeconds?: number;
  pollSeconds?: number;
}): Promise<Mailer> {
  const db = connect(options.databaseUrl, { max: 3, name: 'motebook-mail' });
  const boss = new PgBoss({
    connectionString: options.databaseUrl,
    application_name: 'motebook-mail-queue',
    schema: SCHEMA,
    max: 3,
    // Its tables come with our migrations, and nothing here runs by the clock.
    migrate: false,
    schedule: false,
  });
  boss.on('error', (error) => console.error(`mail queue: ${error.message}`));

  /** Row and job in one transaction: a letter is neither forgotten nor taken twice. */
  async function handOver(): Promise<void> {
    const client = await db.$client.connect();
    try {
      await client.query('BEGIN');
      const { rows } = await client.query<{ id: string }>(
        'SELECT id FROM mail WHERE handed_at IS NULL ORDER BY queued_at LIMIT 100 FOR UPDATE SKIP LOCKED',
      );
      for (const { id } of rows) {
        await boss.send(
          QUEUE,
          { mailId: id },
          {
            db: { executeSql: (text: string, values: unknown[]) => client.query(text, values) },
            ...(options.pauseSeconds === undefined ? {} : { retryDelay: options.pauseSeconds }),
          },
        );
        await client.query('UPDATE mail SET handed_at = motebook_now() WHERE id = $1', [id]);
      }
      await client.query('COMMIT');
    } catch (error) {
      await client.query('ROLLBACK').catch(() => undefined);
      throw error;
    } finally {
      client.release();
    }
  }

  let working: Promise<void> | null = null;
  let again = false;
  /** One hand-over at a time; whoever asks during one causes another after it. */
  function look(): void {
    if (working) return void (again = true);
    working = handOver()
      .catch((error: unknown) => console.error(`mail, outbox: ${(error as Error).message}`))
      .finally(() => {
        working = null;
        if (again) {
          again = false;
          look();
        }
      });
  }

  try {
    await boss.start();
    await boss.work<{ mailId: string }>(
      QUEUE,
      { pollingIntervalSeconds: options.pollSeconds ?? 1 },
      async ([job]) => {
        if (job) await deliver(db, options.send, options.origin, job.data.mailId);
      },
    );
  } catch (error) {
    await boss.stop({ graceful: false }).catch(() => undefined);
    await db.$client.end();
    throw error;
  }
  const stopListening = listen(options.databaseUrl, look);
  const timer = setInterval(look, LOOK_EVERY_MS);
  look();
  return {
    async stop() {
      clearInterval(timer);
      await stopListening();
      again = false;
      await working;
      await boss.stop({ graceful: true, wait: true, timeout: 8_000 });
      await db.$client.end();
    },
  };
}

/** Hears of new letters; while the connection is lost, the timer stands in. */
function listen(databaseUrl: string, onNews: () => void): () => Promise<void> {
  let client: pg.Client | null = null;
  let stopped = false;
  let timer: NodeJS.Timeout | undefined;
  const open = (): void => {
    const mine = new pg.Client({ connectionString: databaseUrl, application_name: 'motebook-mail-news' });
    client = mine;
    let lost = false;
    const lose = () => {
      if (lost || stopped) return;
      lost = true;
      mine.end().catch(() => undefined);
      timer = setTimeout(open, RECONNECT_MS);
    };
    mine.on('error', lose);
    mine.on('end', lose);
    mine.on('notification', onNews);
    mine
      .connect()
      .then(() => mine.query('LISTEN motebook_mail'))
      .then(onNews)
      .catch(lose);
  };
  open();
  return async () => {
    stopped = true;
    clearTimeout(timer);
    await client?.end().catch(() => undefined);
  };
}
