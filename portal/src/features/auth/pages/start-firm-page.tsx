import type { Firm } from '@tallypole/shared/schemas/firms';
import { StartFirm } from '@tallypole/shared/schemas/firms';
import { useNavigate } from 'react-router-dom';
import { post } from '../../../lib/http.ts';
import { meQuery } from '../../../lib/me.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { Form, SelectField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { PageHead } from '../../../ui/page.tsx';
import { timeZones } from '../../../lib/time-zones.ts';

export function Component() {
  const id = useNewId('start-firm');
  const navigate = useNavigate();
  const act = useActForm({
    name: 'start-firm',
    initialValues: { id, name: '', timeZone: Intl.DateTimeFormat().resolvedOptions().timeZone },
    schema: StartFirm,
    send: (values, idempotencyKey) => post<Firm>('firms', values, { idempotencyKey }),
    onDone: (firm) => void queryClient.invalidateQueries(meQuery).then(() => navigate(`/firms/${firm.id}/jobs/new`)),
  });
  return (
    <main style={{ padding: 'clamp(16px, 4vw, 40px)', maxWidth: 760, margin: '0 auto' }} id="main">
      <PageHead title="Start your firm">
        <p className="quiet">You will be its principal: you can create jobs, price changes and send draws. Others are invited later.</p>
      </PageHead>
      <Form act={act} submitLabel="Start the firm">
        <TextField field={act.field('name')} label="Name of the firm" hint="As it stands on your contracts." autoComplete="organization" autoFocus />
        <SelectField field={act.field('timeZone')} label="Time zone" options={timeZones(act.form.values.timeZone)} />
      </Form>
    </main>
  );
}
