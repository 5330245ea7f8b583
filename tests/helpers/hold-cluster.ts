import { ensureCluster } from '../../db/setup/cluster';

/** Starts a cluster and holds it, for a test that kills this process: `hold-cluster.ts FOLDER PORT`. */
const [folder = '', port = ''] = process.argv.slice(2);
const cluster = await ensureCluster({ folder, port: Number(port), say: () => undefined });
console.log(`server ${cluster.server.pid}`);
setInterval(() => undefined, 1000);
