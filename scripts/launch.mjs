// Hands over to the supervisor in TypeScript, once the packages that it needs are there. Plain Node.
import { spawn } from 'node:child_process';
import path from 'node:path';
import { ensurePackages } from './ensure-packages.mjs';

const project = path.resolve(import.meta.dirname, '..');

try {
  ensurePackages(project, (line) => console.log(line));
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
}

// The channel tells the supervisor when this process is gone, however it went.
const supervisor = spawn(
  process.execPath,
  ['--import', 'tsx', path.join(project, 'db/setup/start.ts'), ...process.argv.slice(2)],
  { cwd: project, stdio: ['inherit', 'inherit', 'inherit', 'ipc'] },
);
const stop = () => supervisor.kill('SIGTERM');
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, stop);
supervisor.on('exit', (code) => process.exit(code ?? 1));

// npm passes a polite signal on, but nothing when it is killed; then its child finds itself with another parent.
if (process.env.npm_lifecycle_event) {
  const parent = process.ppid;
  setInterval(() => process.ppid !== parent && stop(), 1000).unref();
}
