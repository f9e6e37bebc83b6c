import { NativeSelect } from '@mantine/core';
import type { Members } from '@tallypole/shared/schemas/members';
import { firmRoles, type FirmRole } from '@tallypole/shared/schemas/roles';
import { useState } from 'react';
import { queryClient } from '../../../lib/query-client.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { RowList } from '../../../ui/row-list.tsx';
import { toast } from '../../../ui/toast.ts';
import { endMember, membersQuery, setRole } from '../api/members.ts';
import { strings } from '../strings.ts';
import classes from './firm.module.css';

type Member = Members['members'][number];

interface MemberListProps {
  firmId: string;
  members: readonly Member[];
  /** Who reads it, where they may change it: nobody ends their own access. */
  principalId: string | null;
}

/** Who belongs to the firm, as what; a principal changes roles and ends access here. */
export const MemberList = ({ firmId, members, principalId }: MemberListProps) => (
  <RowList
    label={strings.members}
    rows={members.map((member) => ({
      key: member.personId,
      name: member.name,
      facts: [member.email, ...(principalId ? [] : [member.role])],
      acts: principalId ? (
        <>
          <RoleChoice key={member.role} firmId={firmId} member={member} />
          {member.personId === principalId ? null : <End firmId={firmId} member={member} />}
        </>
      ) : null,
    }))}
  />
);

const keep = (firmId: string, message: string) => (members: Members) => {
  queryClient.setQueryData(membersQuery(firmId).queryKey, members);
  void queryClient.invalidateQueries({ queryKey: ['firms', firmId] });
  void queryClient.invalidateQueries({ queryKey: ['me'] });
  toast(message);
};

function RoleChoice({ firmId, member: { personId, name, role } }: { firmId: string; member: Member }) {
  const [chosen, setChosen] = useState<FirmRole>(role);
  return (
    <div className={classes['acts']}>
      <NativeSelect
        aria-label={strings.roleOf(name)}
        value={chosen}
        data={[...firmRoles]}
        onChange={(event) => setChosen(firmRoles.find((known) => known === event.currentTarget.value) ?? role)}
      />
      {chosen === role ? null : (
        <ActButton scope={`role:${firmId}:${personId}:${role}:${chosen}`} label={strings.setRole} about={name} send={(key) => setRole(firmId, personId, { role: chosen }, key)} onDone={keep(firmId, strings.roleSet(name))} />
      )}
    </div>
  );
}

const End = ({ firmId, member: { personId, name } }: { firmId: string; member: Member }) => (
  <ActButton
    scope={`end:${firmId}:${personId}`}
    label={strings.end}
    about={name}
    variant="subtle"
    send={(key) => endMember(firmId, personId, key)}
    onDone={keep(firmId, strings.ended(name))}
    question={{ title: strings.endTitle(name), text: <p>{strings.endText}</p>, confirm: strings.endConfirm(name) }}
  />
);
