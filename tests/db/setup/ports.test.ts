import { createServer, type Server } from 'node:net';
import { afterEach, expect, test } from 'vitest';
import { isBusy, refuseBusyPorts, waitForAnswer, waitForListener } from '../../../db/setup/ports';

const open: Server[] = [];
afterEach(async () => {
  for (const server of open.splice(0)) await new Promise((resolve) => server.close(resolve));
});

async function listen(host = '127.0.0.1'): Promise<number> {
  const server = createServer((socket) => socket.destroy());
  open.push(server);
  await new Promise<void>((resolve) => server.listen(0, host, resolve));
  return (server.address() as { port: number }).port;
}

async function freePort(): Promise<number> {
  const port = await listen();
  const server = open.pop();
  await new Promise((resolve) => server?.close(resolve));
  return port;
}

test('a port held on loopback, or on all addresses, is busy; afterwards it is free', async () => {
  expect(await isBusy(await listen())).toBe(true);
  expect(await isBusy(await listen('0.0.0.0'))).toBe(true);
  expect(await isBusy(await freePort())).toBe(false);
});

test('a busy port is named with its variable and a way out', async () => {
  const busy = await listen();
  const free = await freePort();
  await expect(refuseBusyPorts({ MOTEBOOK_PORT: free, MOTEBOOK_WS_PORT: busy })).rejects.toThrow(
    new RegExp(`port ${busy} \\(MOTEBOOK_WS_PORT\\)[\\s\\S]*MOTEBOOK_WS_PORT=\\d+ npm start`),
  );
  await expect(refuseBusyPorts({ MOTEBOOK_PORT: free })).resolves.toBeUndefined();
});

test('two variables with one port are refused', async () => {
  const port = await freePort();
  await expect(refuseBusyPorts({ MOTEBOOK_PORT: port, MOTEBOOK_DB_PORT: port })).rejects.toThrow(/both/);
});

test('waiting ends at its deadline with what was waited for, and at once when everything is to end', async () => {
  const port = await freePort();
  const { signal } = new AbortController();
  await expect(waitForListener(port, 'The file service', 0.3, signal)).rejects.toThrow(
    `The file service does not listen on port ${port}`,
  );
  await expect(
    waitForAnswer(`http://127.0.0.1:${port}/`, 60, AbortSignal.abort(new Error('enough'))),
  ).rejects.toThrow('enough');
  await expect(waitForListener(await listen(), 'The server', 5, signal)).resolves.toBeUndefined();
});
