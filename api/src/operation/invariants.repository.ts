import type pg from 'pg';

interface Invariant {
  name: string;
  /** How many things it is about. */
  count: string;
  /** What breaks it, in words. */
  broken: string;
}

/** What must hold of any database of ours, whatever happened to it. */
const invariants: readonly Invariant[] = [
  {
    name: 'every ledger entry balances',
    count: 'select count(*) from ledger_entry',
    broken: `select format('entry %s of job %s: %s cents over %s lines', e.id, e.job_id, coalesce(sum(l.amount_cents), 0), count(l.entry_id))
      from ledger_entry e left join ledger_line l on l.entry_id = e.id group by e.id, e.job_id having coalesce(sum(l.amount_cents), 0) <> 0 or count(l.entry_id) < 2`,
  },
  {
    name: 'what homeowners owe is what was approved less what was paid',
    count: 'select count(*) from job',
    broken: `select format('job %s: %s cents in the ledger, %s by its draws', id, ledger, draws) from (
      select j.id,
        coalesce((select sum(amount_cents) from ledger_line l where l.job_id = j.id and account in ('homeowner_receivable', 'customer_credit')), 0) as ledger,
        coalesce((select sum(due_cents) from draw d where d.job_id = j.id and approved_at is not null), 0)
          - coalesce((select sum(kept_cents) from payment p where p.job_id = j.id and draw_id is not null), 0) as draws
      from job j) x where ledger <> draws`,
  },
  {
    name: 'every entry of a record follows from the one before',
    count: 'select count(*) from record_entry',
    broken: `select format('entry %s of the %s record of job %s', seq, chain, job_id) from (
      select job_id, chain, seq, text, hash, row_number() over w as place, lag(hash, 1, repeat('0', 64)) over w as before
      from record_entry window w as (partition by job_id, chain order by seq)) x
      where seq <> place or hash <> encode(sha256(convert_to(before || E'\\n' || text, 'UTF8')), 'hex')`,
  },
  {
    name: 'every record ends where its head says',
    count: 'select count(*) from record_head',
    broken: `select format('the %s record of job %s', h.chain, h.job_id) from record_head h
      left join record_entry e on e.job_id = h.job_id and e.chain = h.chain and e.seq = h.seq
      where (h.seq > 0 and e.hash is distinct from h.hash) or exists (select from record_entry x where x.job_id = h.job_id and x.chain = h.chain and x.seq > h.seq)`,
  },
  {
    name: 'every contract sum is what was signed plus the approved changes',
    count: 'select count(*) from job',
    broken: `select format('job %s: changes of %s cents kept, %s approved, %s in the schedule', id, kept, approved, scheduled) from (
      select j.id, j.contract_sum_cents as signed, j.changes_approved_cents as kept,
        coalesce((select sum(charged_cents) from change c where c.job_id = j.id and state = 'approved'), 0) as approved,
        (select sum(scheduled_cents) from schedule_line s where s.job_id = j.id) - j.contract_sum_cents as scheduled
      from job j) x where kept <> approved or kept <> coalesce(scheduled, kept)`,
  },
  {
    name: 'every signature is on the paper that is kept',
    count: 'select count(*) from change_signature',
    broken: `select format('signature %s on change %s', s.id, s.change_id) from change_signature s join change c on c.id = s.change_id
      left join document d on d.id = c.document_id where d.sha256 is distinct from s.document_sha256`,
  },
];

export interface Finding {
  name: string;
  looked: number;
  /** At most MOST of them are named. */
  broken: string[];
}

const MOST = 10;

export async function findings(client: pg.Client): Promise<Finding[]> {
  const found: Finding[] = [];
  for (const { name, count, broken } of invariants) {
    const looked = Number((await client.query<{ count: string }>(count)).rows[0]?.count);
    const { rows } = await client.query<{ format: string }>(`${broken} limit ${MOST}`);
    found.push({ name, looked, broken: rows.map(({ format }) => format) });
  }
  return found;
}

/** Mails that wait to be sent although no job will send them. */
export async function forgottenMails(client: pg.Client, queue: pg.Client): Promise<Finding> {
  const { rows } = await client.query<{ id: string }>(
    `select n.id from notice n left join person p on p.id = n.person_id where n.sent_at is null and (n.to_email is not null or (p.email is not null and p.deactivated_at is null))`,
  );
  const keys = rows.map(({ id }) => `notice:${id}`);
  const queued = new Set((await queue.query<{ key: string }>('select key from graphile_worker.jobs where key = any($1)', [keys])).rows.map(({ key }) => key));
  return { name: 'every unsent mail has its job', looked: rows.length, broken: rows.filter(({ id }) => !queued.has(`notice:${id}`)).map(({ id }) => `mail ${id}`).slice(0, MOST) };
}
