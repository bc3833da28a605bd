/** Loaded into every child of the supervisor: a child whose supervisor was killed ends as well. */
process.on('disconnect', () => process.kill(process.pid, 'SIGTERM'));
// The channel alone must not keep the program alive.
process.channel?.unref();
