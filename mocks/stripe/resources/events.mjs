import { listPage, within } from '../lists.mjs';
import { listOf, paging, range, readParams, text, yesNo } from '../params.mjs';

/**
 * Events of the account, the newest first; `delivery_success` tells apart what an endpoint still has to get.
 * @param {import('../router.mjs').Call} call
 */
export function listEvents({ act, form, path }) {
  const {
    created,
    type,
    types,
    delivery_success: delivered,
    ...page
  } = readParams(
    { ...paging, created: range(), type: text(255), types: listOf(text(255), 20), delivery_success: yesNo() },
    form,
  );
  const open = new Set(
    act.tx
      .all('delivery')
      .map((r) => r.value)
      .filter((d) => d.state !== 'delivered')
      .map((d) => d.event),
  );
  return listPage(act, 'event', path, page, (event) => {
    const typed =
      type === undefined || event.type === type || (type.endsWith('*') && event.type.startsWith(type.slice(0, -1)));
    return (
      within(created, event.created) &&
      typed &&
      (types === undefined || types.includes(event.type)) &&
      (delivered === undefined || open.has(event.id) !== delivered)
    );
  });
}
