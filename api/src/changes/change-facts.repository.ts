import { Injectable } from '@nestjs/common';
import type { Tx } from '../common/unit-of-work.ts';
import { NEXT_DRAW } from '../draws/next-draw.repository.ts';
import type { ChangeFacts } from './change-facts.ts';

const instant = (column: string) => `to_char(${column} at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;
const paper = (column: string) => `(select json_build_object('id', d.id, 'sha256', d.sha256, 'storageKey', d.storage_key, 'effect', d.effect) from document d where d.id = ${column})`;

@Injectable()
export class ChangeFactsRepository {
  async find(tx: Tx, jobId: string, changeId: string): Promise<ChangeFacts | undefined> {
    return (await tx.one<{ facts: ChangeFacts }>(FACTS, [jobId, changeId]))?.facts;
  }
}

// earned = what was billed less what is held back, as the ledger has it
const EARNED = /* sql */ `(select coalesce(-sum(l.amount_cents), 0)::bigint from ledger_line l where l.job_id = j.id and l.account in ('billed_work', 'retainage_receivable'))`;

const BILLED = /* sql */ `(select coalesce(-sum(l.amount_cents), 0)::bigint from ledger_line l where l.job_id = j.id and l.account = 'billed_work')`;

const JOB = /* sql */ `json_build_object('id', j.id, 'firmId', j.firm_id, 'firmName', f.name, 'siteSeesPrices', f.site_sees_prices, 'name', j.name,
  'place', j.street || ', ' || j.city || ', ' || j.state || ' ' || j.zip, 'timeZone', j.time_zone,
  'contractSumCents', j.contract_sum_cents, 'changesApprovedCents', j.changes_approved_cents, 'completeBy', j.complete_by, 'dayKind', j.day_kind,
  'daysApproved', j.days_approved, 'homeownersSign', j.homeowners_sign, 'earnedToDateCents', ${EARNED}, 'billedToDateCents', ${BILLED},
  'hasLoan', exists (select 1 from loan o where o.job_id = j.id), 'consentLimitCents', (select o.consent_limit_cents from loan o where o.job_id = j.id))`;

const CHANGE = /* sql */ `json_build_object('id', c.id, 'number', c.number, 'revision', c.revision, 'state', c.state, 'title', c.title, 'reason', c.reason,
  'origin', c.origin, 'structural', c.structural, 'presentation', c.presentation, 'noCharge', c.no_charge, 'chargedCents', c.charged_cents, 'days', c.days,
  'milestoneId', c.milestone_id, 'milestoneName', m.name, 'goodUntil', c.good_until, 'effectHash', c.effect_hash, 'closedReason', c.closed_reason,
  'createdBy', c.created_by, 'version', c.version)`;

const LINES = /* sql */ `(select coalesce(json_agg(json_build_object('description', l.description, 'effect', l.effect, 'cents', l.cents) order by l.position), '[]')
  from change_line l where l.change_id = c.id)`;

const SCOPE = /* sql */ `(select coalesce(json_agg(json_build_object('description', s.description, 'effect', s.effect, 'quantity', s.quantity, 'unit', s.unit) order by s.position), '[]')
  from change_scope s where s.change_id = c.id)`;

const PHOTOS = /* sql */ `(select coalesce(json_agg(json_build_object('id', p.id, 'note', p.note, 'sha256', x.sha256, 'width', p.width, 'height', p.height,
    'storageKey', (select z->>'key' from jsonb_array_elements(p.sizes) z where z->>'size' = 'medium')) order by h.position), '[]')
  from change_photo h join photo p on p.id = h.photo_id join file x on x.id = p.file_id where h.change_id = c.id)`;

const REVIEWS = /* sql */ `(select coalesce(json_agg(json_build_object('id', r.id, 'kind', r.kind, 'fileId', r.file_id, 'fileName', x.name, 'fileSha256', x.sha256,
    'reviewerName', r.reviewer_name, 'license', r.license, 'reviewedOn', r.reviewed_on, 'note', r.note,
    'current', r.scope_sha256 = c.scope_sha256) order by r.at, r.id), '[]')
  from change_review r join file x on x.id = r.file_id where r.change_id = c.id)`;

const SIGNERS = /* sql */ `(select coalesce(json_agg(json_build_object('personId', h.person_id, 'name', coalesce(p.name, p.email), 'email', p.email,
    'signedAt', ${instant('s.at')}, 'typedName', s.typed_name, 'effectHash', s.effect_hash, 'documentSha256', s.document_sha256,
    'consentVersion', s.consent_version, 'fromAddress', s.from_address) order by h.created_at, h.person_id), '[]')
  from (select m.person_id, m.created_at from job_member m where m.job_id = j.id and m.role = 'homeowner' and (m.ended_at is null
    -- whoever signed stays named, also after they left
    or exists (select 1 from change_signature k where k.change_id = c.id and k.person_id = m.person_id and k.superseded_at is null))) h
  join person p on p.id = h.person_id
  left join change_signature s on s.change_id = c.id and s.person_id = h.person_id and s.superseded_at is null)`;

const SUPERSEDED_BY = /* sql */ `(select json_build_object('id', n.id, 'revision', n.revision, 'chargedCents', n.charged_cents) from change n
  where c.state = 'superseded' and n.job_id = c.job_id and n.number = c.number and n.revision > c.revision and n.state not in ('draft', 'in_review')
  order by n.revision desc limit 1)`;

const COST = /* sql */ `(select json_build_object('lines', k.lines, 'terms', k.terms, 'ownTerms', k.own_terms, 'termsReason', k.terms_reason)
  from change_cost k where k.change_id = c.id)`;

const AUTHOR = /* sql */ `(select json_build_object('name', coalesce(p.name, p.email), 'email', p.email) from person p where p.id = c.created_by)`;

const FACTS = /* sql */ `
  select json_build_object('job', ${JOB}, 'change', ${CHANGE}, 'lines', ${LINES}, 'scope', ${SCOPE}, 'photos', ${PHOTOS}, 'reviews', ${REVIEWS}, 'signers', ${SIGNERS}, 'author', ${AUTHOR},
    'document', ${paper('c.document_id')}, 'signedDocument', ${paper('c.signed_document_id')}, 'supersededBy', ${SUPERSEDED_BY}, 'cost', ${COST}, 'next', ${NEXT_DRAW}) as facts
  from change c join job j on j.id = c.job_id join firm f on f.id = j.firm_id left join milestone m on m.id = c.milestone_id
  where c.job_id = $1 and c.id = $2`;
