// Preloaded into programs that the launcher or the test runner starts: when that process is gone, even by kill -9, the
// channel to it closes and the program ends as if asked to, at the latest after eight seconds. Forks of the program
// inherit this preload and have parents of their own, so it acts only in the program itself.
if (process.env['LEAVE_WITH'] === String(process.ppid)) {
  process.once('disconnect', () => {
    setTimeout(() => process.exit(1), 8000).unref();
    process.kill(process.pid, 'SIGTERM');
  });
  process.channel?.unref(); // listening must not keep a program alive that is done
}
