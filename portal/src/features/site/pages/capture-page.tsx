import { Button, FileButton, TextInput } from '@mantine/core';
import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useParams } from 'react-router-dom';
import { useJob } from '../../../lib/job.ts';
import { milestoneQuery } from '../../../lib/milestones.ts';
import { LinkButton } from '../../../ui/link-button.tsx';
import { FailureState, LoadingState, PageHead } from '../../../ui/page.tsx';
import { QueueList } from '../components/queue-list.tsx';
import classes from '../components/site.module.css';
import { strings } from '../strings.ts';
import { usePhotoQueue } from '../use-photo-queue.ts';

// for wet gloves
const LARGE = { minHeight: 68, fontSize: 18 };

/** The camera for one milestone, and what becomes of the photos. */
export function Component() {
  const job = useJob();
  const { milestoneId = '' } = useParams();
  const { data, error, refetch } = useQuery(milestoneQuery(job.id, milestoneId));
  const { queue, photos } = usePhotoQueue(job.id);
  const [note, setNote] = useState('');
  const [picked, setPicked] = useState(0);
  if (error) return <FailureState error={error} onRetry={() => void refetch()} />;
  if (!data) return <LoadingState />;
  const take = (files: File[]) => {
    queue.add(files, milestoneId, note.trim());
    // a fresh field, so that the same picture can be chosen again
    setPicked((count) => count + 1);
  };
  const own = photos.filter((photo) => photo.milestoneId === milestoneId);
  return (
    <>
      <PageHead title={data.name} />
      <div className={classes['buttons']}>
        <FileButton key={`camera ${picked}`} onChange={take} accept="image/*" capture="environment" multiple>
          {(props) => <Button {...props} fullWidth style={LARGE}>{strings.camera}</Button>}
        </FileButton>
        <FileButton key={`library ${picked}`} onChange={take} accept="image/*" multiple>
          {(props) => <Button {...props} fullWidth variant="outline" style={LARGE}>{strings.library}</Button>}
        </FileButton>
        <TextInput label={strings.note} description={strings.noteHint} value={note} maxLength={1_000} onChange={(event) => setNote(event.currentTarget.value)} />
      </div>
      {own.length > 0 ? <QueueList photos={own} queue={queue} /> : null}
      <div className={classes['after']}>
        <LinkButton to={`/jobs/${job.id}/milestones/${milestoneId}`} variant="outline">{strings.toMilestone}</LinkButton>
        <LinkButton to={`/jobs/${job.id}/site`} variant="subtle">{strings.all}</LinkButton>
      </div>
    </>
  );
}
