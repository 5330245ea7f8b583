import { connect, createServer, type AddressInfo, type Server, type Socket } from 'node:net';
import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest';
import { Listener } from '../../ws-server/listener';
import { until } from '../helpers/collab-clients';
import { createTestDatabase, type TestDatabase } from '../helpers/database';

let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(() => database.drop());

/** Ends the connections that listen, as a restart of the server would. */
const cut = () =>
  database.ws.execute(
    sql`SELECT pg_terminate_backend(pid) FROM pg_stat_activity
        WHERE application_name = 'motebook-listen' AND datname = current_database()`,
  );
const notify = (words: string) => database.ws.execute(sql`SELECT pg_notify('some_channel', ${words})`);

describe('listening (integrity rule C5)', () => {
  test('hears, comes back after its connection was cut, says so once, and hears again', async () => {
    const heard: string[] = [];
    let back = 0;
    const listener = new Listener(
      database.urls.motebook_ws,
      { some_channel: (payload) => heard.push(payload) },
      () => (back += 1),
    );
    await listener.start();
    await notify('one');
    await until('the first word', () => heard.length === 1);
    for (let round = 1; round <= 2; round++) {
      await cut();
      await until('it is back', () => back === round);
      await notify(`round ${round}`);
      await until('it hears again', () => heard.includes(`round ${round}`));
    }
    await listener.stop();
    expect(heard).toEqual(['one', 'round 1', 'round 2']);
  });

  test('the first connection must succeed, and a listener that was stopped stays away', async () => {
    const nowhere = new Listener('postgres://nobody@127.0.0.1:1/none', {}, () => undefined);
    await expect(nowhere.start()).rejects.toThrow();
    await nowhere.stop();
  });
});

describe('while the database is away', () => {
  let away = false;
  let tries = 0;
  const sockets = new Set<Socket>();
  /** Stands before the database: passes everything on, or hangs up. */
  const door: Server = createServer((socket) => {
    socket.on('error', () => undefined);
    if (away) {
      tries += 1;
      socket.destroy();
      return;
    }
    const inner = connect(inject('databasePort'), '127.0.0.1').on('error', () => undefined);
    socket.pipe(inner).pipe(socket);
    for (const one of [socket, inner]) sockets.add(one.on('close', () => sockets.delete(one)));
  });
  const close = () => {
    away = true;
    for (const socket of sockets) socket.destroy();
  };
  beforeAll(() => new Promise<void>((resolve) => door.listen(0, '127.0.0.1', resolve)));
  afterAll(() => {
    close();
    return new Promise((resolve) => door.close(resolve));
  });

  test('it knocks at a steady pace: an outage must not be answered with ever more connections', async () => {
    const { port } = door.address() as AddressInfo;
    const url = new URL(database.urls.motebook_ws);
    url.port = String(port);
    const heard: string[] = [];
    let back = 0;
    const listener = new Listener(
      url.href,
      { some_channel: (payload) => heard.push(payload) },
      () => (back += 1),
    );
    await listener.start();
    close();
    await until('several tries', () => tries >= 4);
    const before = tries;
    await new Promise((resolve) => setTimeout(resolve, 1500));
    // A pause of 0.3 s between two tries: five in this time, fewer on a busy machine.
    expect(tries - before).toBeLessThanOrEqual(6);
    away = false;
    await until('it is back', () => back > 0);
    await notify('after the outage');
    await until('it hears', () => heard.length > 0);
    // One connection, so one announcement, and one word that it is back.
    await notify('the end');
    await until('the last word', () => heard.includes('the end'));
    expect(heard).toEqual(['after the outage', 'the end']);
    expect(back).toBe(1);
    close();
    await until('it knocks again', () => tries > before + 8);
    await listener.stop();
    const ended = tries;
    await new Promise((resolve) => setTimeout(resolve, 700));
    expect(tries).toBe(ended);
  });
});
