import { useJob } from '../../../lib/job.ts';
import { PageHead } from '../../../ui/page.tsx';
import { ChangeEditor } from '../components/change-editor.tsx';

export function Component() {
  const job = useJob();
  return (
    <>
      <PageHead title="Price a change">
        <p className="quiet">It stays a draft, seen by the firm alone, until you send it out.</p>
      </PageHead>
      <ChangeEditor job={job} from={null} as="new" />
    </>
  );
}
