import { connect, createServer } from 'node:net';

/** Whether a program holds a loopback port: only trying to take it tells for sure. */
export function isBusy(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(true));
    probe.listen(port, '127.0.0.1', () => probe.close(() => resolve(false)));
  });
}

/**
 * @param ports - port by the name of the variable that sets it.
 * @throws Error that names each busy port, its variable and the remedy; also when two variables name one port.
 */
export async function refuseBusyPorts(ports: Readonly<Record<string, number>>): Promise<void> {
  const named = Object.entries(ports);
  for (const [variable, port] of named) {
    const other = named.find(([name, value]) => value === port && name !== variable);
    if (other)
      throw new Error(`${variable} and ${other[0]} are both ${port}. Choose another port for one of them.`);
  }
  const busy: [string, number][] = [];
  for (const [variable, port] of named) if (await isBusy(port)) busy.push([variable, port]);
  const [first] = busy;
  if (!first) return;
  const list = busy.map(([variable, port]) => `  port ${port} (${variable})`).join('\n');
  const other = first[1] + 1000 > 65_535 ? first[1] - 1000 : first[1] + 1000;
  throw new Error(
    `Another program uses a port that Motebook needs:\n${list}\nEnd that program, or choose another port, for example: ${first[0]}=${other} npm start`,
  );
}

/** Polls an address until it answers with something else than a fault. @throws Error after `seconds`, or `signal`'s reason. */
export function waitForAnswer(url: string, seconds: number, signal: AbortSignal): Promise<void> {
  const answers = async () => {
    const response = await fetch(url, { redirect: 'manual', signal });
    await response.body?.cancel();
    return response.status < 500;
  };
  return poll(answers, `${url} does not answer`, seconds, signal);
}

/** Polls until somebody listens on a loopback port. @throws Error after `seconds`, or `signal`'s reason. */
export function waitForListener(
  port: number,
  what: string,
  seconds: number,
  signal: AbortSignal,
): Promise<void> {
  return poll(() => isListening(port), `${what} does not listen on port ${port}`, seconds, signal);
}

async function poll(
  ready: () => Promise<boolean>,
  complaint: string,
  seconds: number,
  signal: AbortSignal,
): Promise<void> {
  const deadline = Date.now() + seconds * 1000;
  for (;;) {
    signal.throwIfAborted();
    if (await ready().catch(() => false)) return;
    if (Date.now() > deadline)
      throw new Error(`${complaint} after ${seconds} s. See the logs in the data folder.`);
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}

/** By connecting: trying to take the port, as `isBusy` does, would get in the way of the program that is about to. */
function isListening(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = connect(port, '127.0.0.1');
    socket.once('connect', () => {
      socket.destroy();
      resolve(true);
    });
    socket.once('error', () => resolve(false));
  });
}
