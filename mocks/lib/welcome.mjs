/**
 * What the launcher says when everything is up.
 * @param {{ ports: ReturnType<import('./settings.mjs').portsOf>, env: Record<string, string>, settings: Record<string, string> }} house
 */
export async function welcome({ ports, env, settings }) {
  /** @type {[string, string][]} */
  const places = [['Portal', env['PUBLIC_URL'] ?? '']];
  places.push(['Mail', ports.mailPage ? `${env['MAIL_PAGE_URL']}  (every mail stays here, sign-in codes included)` : `goes out through ${withoutPassword(settings['SMTP_URL'] ?? '')}`]);
  places.push(['Payments', ports.stripe ? `${env['STRIPE_API_URL']}  (stand-in for Stripe; no money moves)` : 'Stripe, by the keys in .env']);
  const lines = ['', 'Tallypole is ready.', '', ...places.map(([name, where]) => `  ${name.padEnd(10)}${where}`)];
  const people = await demoPeople(ports.web.port);
  if (people.length > 0) {
    const wide = Math.max(...people.map(({ email }) => email.length));
    lines.push('', '  Demo sign-ins; the code comes by mail:', '');
    for (const { name, email, role, what } of people) lines.push(`    ${email.padEnd(wide)}  ${name}, ${role}: ${what}`);
  }
  lines.push('', 'Ctrl-C stops everything. The data stay in .data; npm run reset removes them.', '');
  return lines.join('\n');
}

/**
 * @param {number} port
 * @returns {Promise<{ name: string, email: string, role: string, what: string }[]>} none where the demo is off
 */
async function demoPeople(port) {
  try {
    const answer = await fetch(`http://127.0.0.1:${port}/api/demo/people`, { signal: AbortSignal.timeout(5000) });
    return answer.ok ? /** @type {any} */ (await answer.json()).people : [];
  } catch {
    return [];
  }
}

/** @param {string} url */
function withoutPassword(url) {
  const { protocol, host } = new URL(url);
  return `${protocol}//${host}`;
}
