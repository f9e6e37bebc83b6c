// The mail server as a process: SMTP_PORT, MAIL_PAGE_PORT, MAIL_DIR. Sends 'ready' to its parent.
import { mkdirSync } from 'node:fs';
import { start } from './server.mjs';

const { SMTP_PORT, MAIL_PAGE_PORT, MAIL_DIR } = process.env;
if (!SMTP_PORT || !MAIL_PAGE_PORT || !MAIL_DIR) throw new Error('SMTP_PORT, MAIL_PAGE_PORT and MAIL_DIR are needed');
mkdirSync(MAIL_DIR, { recursive: true });
const server = await start({ smtpPort: Number(SMTP_PORT), pagePort: Number(MAIL_PAGE_PORT), dataDir: MAIL_DIR });
for (const signal of ['SIGINT', 'SIGTERM']) {
  process.once(signal, () => {
    setTimeout(() => process.exit(0), 2000).unref(); // an open page holds its event stream
    void server.stop().finally(() => process.exit(0));
  });
}
process.send?.('ready');
