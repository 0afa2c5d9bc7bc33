// Loaded first into every service: its end of a channel closes when the process that started it dies, however
// it dies, and then the service ends too instead of holding its port for ever.
const { channel } = process;
if (channel) {
  process.once('disconnect', () => {
    process.kill(process.pid, 'SIGTERM');
    setTimeout(() => process.exit(1), 5000).unref();
  });
  // Listening must not keep a service alive that has nothing left to do.
  channel.unref();
}
