// Loaded into every process that the supervisor starts: when the supervisor is gone, even killed, the process ends too.
process.on('disconnect', () => process.kill(process.pid, 'SIGTERM'));
// The channel must not keep a process alive that has finished by itself.
process.channel?.unref();
