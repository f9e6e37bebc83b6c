// Lives until it is told to end, or longer.
if (process.argv[2] === 'deaf') process.on('SIGTERM', () => {});
setInterval(() => {}, 1000);
process.send?.(process.pid);
