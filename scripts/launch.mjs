// Hands over to a program in TypeScript, once the packages that it needs are there. Plain Node.
import { spawn } from 'node:child_process';
import path from 'node:path';
import { ensurePackages } from './ensure-packages.mjs';

/**
 * Runs a program of the project with the arguments of this process, and ends as it ends.
 * @param {string} program - its file, relative to the project
 */
export function launch(program) {
  const project = path.resolve(import.meta.dirname, '..');
  try {
    ensurePackages(project, (line) => console.log(line));
  } catch (error) {
    console.error(error instanceof Error ? error.message : error);
    process.exit(1);
  }

  // The channel tells the program when this process is gone, however it went.
  const child = spawn(
    process.execPath,
    ['--import', 'tsx', path.join(project, program), ...process.argv.slice(2)],
    { cwd: project, stdio: ['inherit', 'inherit', 'inherit', 'ipc'] },
  );
  const stop = () => child.kill('SIGTERM');
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, stop);
  child.on('exit', (code) => process.exit(code ?? 1));

  // npm passes a polite signal on, but nothing when it is killed; then its child finds itself with another parent.
  if (process.env.npm_lifecycle_event) {
    const parent = process.ppid;
    setInterval(() => process.ppid !== parent && stop(), 1000).unref();
  }
}
