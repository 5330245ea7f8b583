import pg from 'pg';

/**
 * A connection of its own that hears the database's announcements; never one of a pool, which would hand it to others.
 * When it breaks it comes back, and `onBack` lets the listener catch up on what it has missed.
 */
export class Listener {
  private client: pg.Client | null = null;
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
    client.on('end', () => this.again());
    client.on('notification', (message) => this.channels[message.channel]?.(message.payload ?? ''));
    await client.connect();
    this.client = client;
    for (const channel of Object.keys(this.channels)) await client.query(`LISTEN ${channel}`);
  }

  async stop(): Promise<void> {
    this.ended = true;
    await this.client?.end();
  }

  private again(): void {
    if (this.ended) return;
    this.client = null;
    setTimeout(() => {
      if (this.ended) return;
      this.start().then(this.onBack, () => this.again());
    }, 300);
  }
}
