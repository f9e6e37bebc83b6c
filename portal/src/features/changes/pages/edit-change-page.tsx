import { useSuspenseQuery } from '@tanstack/react-query';
import { useLocation, useParams } from 'react-router-dom';
import { useJob } from '../../../lib/job.ts';
import { PageHead } from '../../../ui/page.tsx';
import { changeQuery } from '../api/changes.ts';
import { ChangeEditor } from '../components/change-editor.tsx';
import { changeName } from '../strings.ts';

/** Edits a draft, or makes a revision of what was sent out. */
export function Component() {
  const job = useJob();
  const { changeId = '' } = useParams();
  const { data: change } = useSuspenseQuery(changeQuery(job.id, changeId));
  const as = useLocation().pathname.endsWith('/revise') ? 'revise' : 'edit';
  return (
    <>
      <PageHead title={as === 'revise' ? `Revise ${changeName(change)}` : `Edit ${changeName(change)}`} />
      <ChangeEditor job={job} from={change} as={as} key={`${as} ${change.version}`} />
    </>
  );
}
