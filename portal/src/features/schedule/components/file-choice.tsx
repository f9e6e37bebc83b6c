import { FileButton, Button } from '@mantine/core';
import { strings } from '../strings.ts';
import classes from './schedule.module.css';

const ACCEPTED = '.csv,.tsv,.txt,.xlsx,text/csv,application/vnd.openxmlformats-officedocument.spreadsheetml.sheet';

/** Where the file is chosen, and what it should look like. */
export const FileChoice = ({ busy, again, onFile }: { busy: boolean; again: boolean; onFile: (file: File) => void }) => (
  <div className={classes['choice']}>
    {again ? null : <p className="quiet">{strings.chooseHint}</p>}
    <FileButton onChange={(file) => file && onFile(file)} accept={ACCEPTED}>
      {(props) => (
        <Button {...props} loading={busy} variant={again ? 'outline' : 'filled'}>
          {again ? strings.importAgain : strings.choose}
        </Button>
      )}
    </FileButton>
    <span role="status" className="mantine-VisuallyHidden-root">
      {busy ? strings.reading : ''}
    </span>
  </div>
);
