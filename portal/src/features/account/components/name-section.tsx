import { Name } from '@tallypole/shared/schemas/auth';
import { enter, useMe } from '../../../lib/me.ts';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { Section } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { setName } from '../api/account.ts';
import { strings } from '../strings.ts';

export function NameSection() {
  const { person } = useMe();
  const act = useActForm({
    name: 'account-name',
    initialValues: { name: person.name ?? '' },
    schema: Name,
    send: ({ name }) => setName(name),
    onDone: (me) => {
      enter(me);
      toast(strings.nameSaved);
    },
  });
  return (
    <Section title={strings.nameTitle} ruled={false}>
      <Form act={act} submitLabel={strings.saveName}>
        <TextField field={act.field('name')} label={strings.name} hint={strings.nameHint} autoComplete="name" />
      </Form>
    </Section>
  );
}
