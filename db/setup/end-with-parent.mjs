// Loaded into every process that the supervisor starts, and into what those fork: when its parent is gone, even killed,
// a process ends too.
const GRACE_MS = 5_000;
const LOOK_MS = 1_000;

function end() {
  process.kill(process.pid, 'SIGTERM');
  // Whoever is still busy tidying up by then has nobody left to tidy up for.
  setTimeout(() => process.kill(process.pid, 'SIGKILL'), GRACE_MS).unref();
}

const parent = process.ppid;
if (process.connected === false) {
  // The supervisor was gone before this line was reached.
  end();
} else if (parent === Number(process.env.MOTEBOOK_SUPERVISOR)) {
  process.on('disconnect', end);
  // The channel must not keep a process alive that has finished by itself.
  process.channel?.unref();
} else {
  // A forked worker lives by its own channel, which is left alone; an orphan finds itself with another parent.
  const look = setInterval(() => {
    if (process.ppid === parent) return;
    clearInterval(look);
    end();
  }, LOOK_MS);
  look.unref();
}
