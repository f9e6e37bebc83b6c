import { Name } from '@tallypole/shared/schemas/auth';
import { useNavigate, useSearchParams } from 'react-router-dom';
import { enter } from '../../../lib/me.ts';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { PageHead } from '../../../ui/page.tsx';
import { setName } from '../api/sign-in.ts';
import { safePath } from '../../../lib/safe-path.ts';
import { strings } from '../strings.ts';

/** Whoever comes for the first time says how others know them. */
export function Component() {
  const [params] = useSearchParams();
  const navigate = useNavigate();
  const act = useActForm({
    name: 'my-name',
    initialValues: { name: '' },
    schema: Name,
    send: ({ name }) => setName(name),
    onDone: (me) => {
      enter(me);
      void navigate(safePath(params.get('to')), { replace: true });
    },
  });
  return (
    <main style={{ padding: 'clamp(16px, 4vw, 40px)', maxWidth: 760, margin: '0 auto' }} id="main">
      <PageHead title={strings.nameTitle} />
      <Form act={act} submitLabel={strings.goOn}>
        <TextField field={act.field('name')} label={strings.name} hint={strings.nameHint} autoComplete="name" autoFocus />
      </Form>
    </main>
  );
}
