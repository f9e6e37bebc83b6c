import { showDesk, showReceipt } from './desk.mjs';
import { sendProblem } from './layout.mjs';
import { showOnboarding, submitOnboarding } from './onboard.mjs';
import { showPay, submitPay } from './pay.mjs';
import { submitStep } from './status.mjs';

/**
 * The pages for people.
 * @param {import('../types.d.ts').World} world
 * @param {import('node:http').IncomingMessage} request
 * @param {import('node:http').ServerResponse} response
 * @param {string} body
 */
export function answerPage(world, request, response, body) {
  const url = new URL(request.url ?? '/', 'http://stand-in');
  const [, page = '', id = '', step] = url.pathname.split('/');
  // A form on another site must not press these buttons.
  if (request.method === 'POST' && request.headers['sec-fetch-site'] === 'cross-site')
    return sendProblem(response, 403, 'This came from another site.');
  switch (`${request.method ?? 'GET'} ${page}`) {
    case 'GET ':
      return showDesk(world, response);
    case 'GET pay':
      return showPay(world, response, id, { query: url.searchParams });
    case 'POST pay':
      return step === undefined ? submitPay(world, response, id, body) : submitStep(world, response, id, step, body);
    case 'GET onboard':
      return showOnboarding(world, response, id);
    case 'POST onboard':
      return submitOnboarding(world, response, id, body);
    case 'GET receipt':
      return showReceipt(world, response, id);
    default:
      return sendProblem(response, 404, 'There is no such page.');
  }
}
