// A mail server that takes everything and counts it: a process of its own, so that both measurements meet the same one.
import { SMTPServer } from 'smtp-server';

let taken = 0;
const server = new SMTPServer({
  disabledCommands: ['AUTH', 'STARTTLS'],
  onData: (stream, _session, done) => {
    stream.resume();
    stream.on('end', () => {
      taken += 1;
      done();
    });
  },
});
server.on('error', () => undefined);
server.listen(0, '127.0.0.1', () => process.send({ port: server.server.address().port }));
process.on('message', () => process.send({ taken }));
process.once('disconnect', () => process.exit(0));
