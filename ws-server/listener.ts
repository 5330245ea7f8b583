import pg from 'pg';

/** Between two attempts to come back. */
const PAUSE_MS = 300;

/**
 * A connection of its own that hears the database's announcements; never one of a pool, which would hand it to others.
 * When it breaks it comes back, and `onBack` lets the listener catch up on what it has missed.
 */
export class Listener {
  private client: pg.Client | null = null;
  private timer: NodeJS.Timeout | null = null;
  private ended = false;

  constructor(
    private readonly url: string,
    private readonly channels: Readonly<Record<string, (payload: string) => void>>,
    private readonly onBack: () => void,
  ) {}

  /** Connects; afterwards it looks after itself. @throws Error when the first connection fails. */
  async start(): Promise<void> {
    const client = new pg.Client({
      connectionString: this.url,
      application_name: 'motebook-listen',
      keepAlive: true,
    });
    client.on('error', () => undefined);
    client.on('notification', (message) => this.channels[message.channel]?.(message.payload ?? ''));
    try {
      await client.connect();
      for (const channel of Object.keys(this.channels)) await client.query(`LISTEN ${channel}`);
    } catch (error) {
      void client.end().catch(() => undefined);
      throw error;
    }
    if (this.ended) return client.end();
    this.client = client;
    // Only now: an attempt that fails ends too, and must not be answered twice.
    client.on('end', () => this.again());
  }

  async stop(): Promise<void> {
    this.ended = true;
    if (this.timer) clearTimeout(this.timer);
    await this.client?.end();
  }

  private again(): void {
    if (this.ended) return;
    this.client = null;
    this.timer = setTimeout(() => {
      this.start().then(
        () => this.ended || this.onBack(),
        () => this.again(),
      );
    }, PAUSE_MS);
  }
}
