/** A payment as JSON in the shape of the schema; `p` is the payment, `d` its draw where it has one. */
export const PAYMENT_JSON = /* sql */ `json_build_object('id', p.id, 'drawId', p.draw_id, 'drawNumber', d.number, 'method', p.method, 'source', p.source,
  'state', p.state, 'amountCents', p.amount_cents, 'keptCents', p.kept_cents, 'feeCents', p.fee_cents, 'reference', p.reference,
  'startedOn', p.started_on, 'settledOn', p.settled_on, 'trouble', p.trouble,
  'createdAt', to_char(p.created_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'))`;
/** What the builder has of a draw from each source. */
export const KEPT = (source: 'homeowner' | 'loan') =>
  /* sql */ `(select coalesce(sum(k.kept_cents), 0)::bigint from payment k where k.draw_id = d.id and k.source = '${source}')`;
