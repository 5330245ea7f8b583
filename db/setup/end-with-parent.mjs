// Loaded into every process that the supervisor starts: when the supervisor is gone, even killed, the process ends too.
const GRACE_MS = 5_000;

function end() {
  process.kill(process.pid, 'SIGTERM');
  // Whoever is still busy tidying up by then has nobody left to tidy up for.
  setTimeout(() => process.kill(process.pid, 'SIGKILL'), GRACE_MS).unref();
}

if (process.connected === false) {
  // The supervisor was gone before this line was reached.
  end();
} else if (process.ppid === Number(process.env.MOTEBOOK_SUPERVISOR)) {
  process.on('disconnect', end);
  // The channel must not keep a process alive that has finished by itself. Processes that this one forks load this
  // file too, but live by their channel: it is left alone there.
  process.channel?.unref();
}
