// What nodemailer alone can do: the same mail so many times over a pool. Prints mails per second.
import { createTransport } from 'nodemailer';

const { SMTP_URL, COUNT, TEXT, HTML } = process.env;
const transport = createTransport(SMTP_URL, { pool: true, maxConnections: 5 });
const before = performance.now();
let left = Number(COUNT);
const sendNext = async () => {
  while (left > 0) {
    left -= 1;
    await transport.sendMail({ from: { name: 'Bench', address: 'bench@house.example' }, to: { name: 'Somebody', address: 'somebody@house.example' }, subject: 'A milestone is claimed', text: TEXT, html: HTML });
  }
};
await Promise.all(Array.from({ length: 10 }, sendNext));
console.log(Number(COUNT) / ((performance.now() - before) / 1_000));
transport.close();
