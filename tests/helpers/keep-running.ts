import { Children } from '../../db/setup/children';
import path from 'node:path';

/** A start in small, for tests that kill it: keeps two processes running and prints their ids whenever they change. */
const project = path.resolve(import.meta.dirname, '../..');
const children = new Children(project, process.argv[2] ?? '', (line) => console.log(`said ${line}`));
children.onChange = () => console.log(`pids ${JSON.stringify(children.pids())}`);
for (const name of ['first', 'second']) {
  children.start({ name, args: ['--eval', 'setInterval(() => {}, 1000)'], environment: {} });
}
process.on('SIGTERM', () => void children.stop().then(() => process.exit(0)));
