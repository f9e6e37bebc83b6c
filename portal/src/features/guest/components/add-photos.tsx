import { Button, FileButton, Progress, TextInput } from '@mantine/core';
import { useEffect, useRef, useState } from 'react';
import { v7 } from 'uuid';
import { Problem } from '../../../lib/problem.ts';
import { sendPhoto, type GuestPhoto } from '../api/guest.ts';
import { strings } from '../strings.ts';
import classes from './guest.module.css';

interface Upload extends GuestPhoto {
  percent: number;
  sent: boolean;
  trouble: string | null;
}

/** Photos of a guest go one after the other; one that was not sent keeps its id, so that a second try is the same photo. */
export function AddPhotos({ milestoneId, onSent }: { milestoneId: string; onSent: () => void }) {
  const [uploads, setUploads] = useState<readonly Upload[]>([]);
  const [note, setNote] = useState('');
  const [picked, setPicked] = useState(0);
  const busy = useRef(false);
  const next = uploads.find(({ sent, trouble }) => !sent && trouble === null);
  useEffect(() => {
    if (!next || busy.current) return;
    busy.current = true;
    const change = (part: Partial<Upload>) => setUploads((before) => before.map((upload) => (upload.id === next.id ? { ...upload, ...part } : upload)));
    sendPhoto(next, (percent) => change({ percent }))
      .then(
        () => {
          change({ sent: true });
          onSent();
        },
        (error: unknown) => change({ trouble: error instanceof Problem ? (error.errors[0]?.message ?? error.message) : 'Sorry, something went wrong. The photo is kept here.' }),
      )
      .finally(() => {
        busy.current = false;
      });
  }, [next, onSent]);
  const take = (files: File[]) => {
    setUploads((before) => [...before, ...files.map((file): Upload => ({ id: v7(), milestoneId, note: note.trim(), file, percent: 0, sent: false, trouble: null }))]);
    // a fresh field, so that the same picture can be chosen again
    setPicked((count) => count + 1);
  };
  const retry = (id: string) => setUploads((before) => before.map((upload) => (upload.id === id ? { ...upload, percent: 0, trouble: null } : upload)));
  return (
    <>
      <TextInput label={strings.photoNote} description={strings.photoNoteHint} value={note} maxLength={1_000} onChange={(event) => setNote(event.currentTarget.value)} />
      <div className={classes['buttons']}>
        <FileButton key={`camera ${picked}`} onChange={take} accept="image/*" capture="environment" multiple>
          {(props) => <Button {...props} variant="outline" size="md">{strings.camera}</Button>}
        </FileButton>
        <FileButton key={`library ${picked}`} onChange={take} accept="image/*" multiple>
          {(props) => <Button {...props} variant="outline" size="md">{strings.library}</Button>}
        </FileButton>
      </div>
      {uploads.length > 0 ? <p role="status">{strings.sending(uploads.filter(({ sent }) => sent).length, uploads.length)}</p> : null}
      <ul className={classes['uploads']}>
        {uploads.filter(({ sent }) => !sent).map(({ id, file, percent, trouble }) => (
          <li key={id}>
            <div>
              {file.name}
              {trouble ? <div className={classes['error']}>{trouble}</div> : <Progress value={percent} size="sm" aria-label={`${file.name}: ${percent} %`} />}
            </div>
            {trouble ? <Button variant="outline" onClick={() => retry(id)}>{strings.retry}</Button> : null}
          </li>
        ))}
      </ul>
    </>
  );
}
