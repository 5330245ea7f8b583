import { createServer } from 'node:net';

/** Whether somebody listens on a loopback port. */
export function isBusy(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(true));
    probe.listen(port, '127.0.0.1', () => probe.close(() => resolve(false)));
  });
}

/** @throws Error that names each busy port, its variable and the remedy. */
export async function refuseBusyPorts(ports: Readonly<Record<string, number>>): Promise<void> {
  const busy: string[] = [];
  for (const [variable, port] of Object.entries(ports))
    if (await isBusy(port)) busy.push(`  ${variable} = ${port}`);
  if (busy.length === 0) return;
  throw new Error(
    `Another program listens on a port that Motebook needs:\n${busy.join('\n')}\nEnd that program, or choose another port, for example: ${busy[0]?.trim().split(' ')[0]}=${Number(Object.values(ports)[0]) + 1000} npm start`,
  );
}

/** Polls an address until it answers. @throws Error after `seconds`. */
export async function waitForAnswer(url: string, seconds: number): Promise<void> {
  const deadline = Date.now() + seconds * 1000;
  for (;;) {
    try {
      const response = await fetch(url, { redirect: 'manual' });
      if (response.status < 500) return;
    } catch {
      // Not listening yet.
    }
    if (Date.now() > deadline)
      throw new Error(`${url} does not answer after ${seconds} s. See the logs in the data folder.`);
    await new Promise((resolve) => setTimeout(resolve, 150));
  }
}

/** Polls until somebody listens on a loopback port. @throws Error after `seconds`. */
export async function waitForListener(port: number, what: string, seconds: number): Promise<void> {
  const deadline = Date.now() + seconds * 1000;
  while (!(await isBusy(port))) {
    if (Date.now() > deadline)
      throw new Error(
        `${what} does not listen on port ${port} after ${seconds} s. See its log in the data folder.`,
      );
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}
