import { Button } from '@mantine/core';
import { useEffect, useRef } from 'react';
import { toast } from '../../../ui/toast.ts';
import { stepStrings as strings } from '../strings.ts';
import classes from './account.module.css';

/** Ten codes, this once; copied, saved as a file or printed with the page. */
export function RecoveryCodeList({ codes, onKept }: { codes: readonly string[]; onKept: () => void }) {
  const heading = useRef<HTMLHeadingElement>(null);
  useEffect(() => heading.current?.focus(), []);
  const text = `${codes.join('\n')}\n`;
  const copy = () => void navigator.clipboard.writeText(text).then(() => toast(strings.copied));
  return (
    <section className={classes['codes']} aria-label={strings.codesTitle}>
      <h2 ref={heading} tabIndex={-1}>
        {strings.codesTitle}
      </h2>
      <p>{strings.keep}</p>
      <ol>
        {codes.map((code) => (
          <li key={code}>{code}</li>
        ))}
      </ol>
      <div className={classes['acts']}>
        <Button onClick={onKept}>{strings.kept}</Button>
        <Button variant="outline" onClick={copy}>
          {strings.copy}
        </Button>
        <Button variant="outline" onClick={() => save(text)}>
          {strings.save}
        </Button>
      </div>
    </section>
  );
}

function save(text: string): void {
  const link = document.createElement('a');
  link.href = URL.createObjectURL(new Blob([text], { type: 'text/plain' }));
  link.download = 'Tallypole recovery codes.txt';
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 1_000);
}
