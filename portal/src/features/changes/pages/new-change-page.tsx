import { useJob } from '../../../lib/job.ts';
import { LinkButton } from '../../../ui/link-button.tsx';
import { PageHead } from '../../../ui/page.tsx';
import { ChangeEditor } from '../components/change-editor.tsx';

export function Component() {
  const job = useJob();
  return (
    <>
      <PageHead title="Price a change">
        <p className="quiet">It stays a draft, seen by the firm alone, until you send it out.</p>
        <div>
          <LinkButton to={`/jobs/${job.id}/takeoff`} variant="outline">Count a floor first</LinkButton>
        </div>
      </PageHead>
      <ChangeEditor job={job} from={null} as="new" />
    </>
  );
}
