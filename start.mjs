#!/usr/bin/env node
// The one command. Plain Node without any package, because it is what installs the packages.
import { spawn } from 'node:child_process';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { ensurePackages } from './scripts/ensure-packages.mjs';

const project = path.dirname(fileURLToPath(import.meta.url));

try {
  await ensurePackages(project);
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
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => supervisor.kill('SIGTERM'));
supervisor.on('exit', (code) => process.exit(code ?? 1));
