import { MailDev } from 'maildev';

/**
 * Starts a mail server that delivers nowhere and the page that shows what came in. Mails stay in `dataDir` and are there
 * again after a restart. Loopback only.
 * @param {{ smtpPort: number, pagePort: number, dataDir: string }} options
 * @returns {Promise<{ stop: () => Promise<void> }>}
 */
export async function start({ smtpPort, pagePort, dataDir }) {
  const server = new MailDev({ smtp: smtpPort, web: pagePort, ip: '127.0.0.1', webIp: '127.0.0.1', mailDirectory: dataDir, maxEmails: 2000, silent: true });
  await server.start();
  return { stop: () => server.stop() };
}
