/** A launcher that is killed can't stop its children: they leave when its channel closes. */
export function leaveWithParent(close: () => Promise<void>): void {
  if (process.connected) process.once('disconnect', () => void close().finally(() => process.exit(0)));
}
