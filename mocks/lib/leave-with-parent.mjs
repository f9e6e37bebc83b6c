// Preloaded into programs that the launcher or the test runner starts: when that process is gone, even by kill -9, the
// channel to it closes and the program, with what it started itself, ends as if asked to, at the latest after eight
// seconds. Programs that this one starts with the same arguments have parents of their own, so the mark is taken away.
const marked = process.env['LEAVE_WITH_PARENT'];
delete process.env['LEAVE_WITH_PARENT'];

if (marked) {
  if (!process.connected) process.exit(1); // it was gone before this one had loaded
  process.once('disconnect', () => {
    setTimeout(() => process.exit(1), 8000).unref();
    try {
      process.kill(-process.pid, 'SIGTERM'); // it leads a process group of its own
    } catch {
      process.kill(process.pid, 'SIGTERM');
    }
  });
  process.channel?.unref(); // listening must not keep a program alive that is done
}
