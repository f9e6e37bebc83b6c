import type { Account } from '@tallypole/shared/schemas/auth-account';
import { writtenInstant } from '../../../lib/dates.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { Section } from '../../../ui/page.tsx';
import { RowList } from '../../../ui/row-list.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { endOtherSessions, endSession } from '../api/account.ts';
import { strings } from '../strings.ts';
import { browserZone, useAccountDone } from './use-account.ts';

type Session = Account['sessions'][number];

export function SessionsSection({ sessions }: { sessions: readonly Session[] }) {
  const done = useAccountDone();
  const zone = browserZone();
  return (
    <Section title={strings.sessionsTitle}>
      <p style={{ marginBottom: 12 }}>{strings.sessionsLead}</p>
      <RowList
        label={strings.sessionsTitle}
        rows={sessions.map((session) => ({
          key: session.id,
          name: (
            <>
              {session.device} {session.current ? <StateTag meaning="settled">{strings.current}</StateTag> : null}
            </>
          ),
          facts: [strings.lastSeen(writtenInstant(session.lastSeenAt, zone)), strings.started(writtenInstant(session.startedAt, zone))],
          acts: session.current ? undefined : <ActButton scope={`session-end:${session.id}`} label={strings.end} about={about(session, zone)} send={() => endSession(session.id)} onDone={done(strings.ended)} />,
        }))}
      />
      {sessions.length > 1 ? (
        <div style={{ marginTop: 16 }}>
          <ActButton scope={`sessions-end:${sessions.length}`} label={strings.endOthers} about={strings.sessionsTitle} send={endOtherSessions} onDone={done(strings.othersEnded)} />
        </div>
      ) : null}
    </Section>
  );
}

const about = ({ device, startedAt }: Session, zone: string): string => `${device}, ${strings.started(writtenInstant(startedAt, zone))}`;
