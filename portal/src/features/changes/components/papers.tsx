import type { Change } from '@tallypole/shared/schemas/changes';
import { writtenInstant } from '../../../lib/dates.ts';
import { Section } from '../../../ui/page.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { documentUrl, isOut } from '../api/changes.ts';

/** Who signed, and the papers with their SHA-256. */
export function Papers({ jobId, change, timeZone }: { jobId: string; change: Change; timeZone: string }) {
  const paper = change.signedDocument ?? change.document;
  const signed = change.signers.some(({ signedAt }) => signedAt !== null);
  if (!paper && !signed) return null;
  return (
    <Section title={change.state === 'approved' ? 'Signed' : isOut(change) || signed ? 'Signatures' : 'The paper'} ruled={false}>
      {isOut(change) || signed ? (
        <ul style={{ listStyle: 'none', margin: '0 0 12px', padding: 0 }}>
          {change.signers.map((signer) => (
            <li key={signer.personId} style={{ padding: '4px 0' }}>
              <StateTag meaning={signer.signedAt ? 'settled' : 'waits'}>{signer.signedAt ? 'signed' : 'not yet'}</StateTag> {signer.name}
              {signer.signedAt ? <span className="quiet">, {writtenInstant(signer.signedAt, timeZone)}</span> : null}
            </li>
          ))}
        </ul>
      ) : null}
      {paper ? (
        <p>
          <a href={documentUrl(jobId, paper.id)}>{change.signedDocument ? 'The signed paper (PDF)' : isOut(change) ? 'The paper to be signed (PDF)' : 'The paper as it was sent out (PDF)'}</a>
          <br />
          <span className="quiet" style={{ fontSize: 12.5, overflowWrap: 'anywhere' }}>
            SHA-256 {paper.sha256}
          </span>
        </p>
      ) : null}
    </Section>
  );
}
