// Loaded into every process that the supervisor starts: when the supervisor is gone, even killed, the process ends too.
const GRACE_MS = 5_000;

function end() {
  process.kill(process.pid, 'SIGTERM');
  // Whoever is still busy tidying up by then has nobody left to tidy up for.
  setTimeout(() => process.kill(process.pid, 'SIGKILL'), GRACE_MS).unref();
}

process.on('disconnect', end);
// The supervisor may be gone before this line was reached.
if (process.connected === false) end();
// The channel must not keep a process alive that has finished by itself.
process.channel?.unref();
