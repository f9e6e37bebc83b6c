import { Button } from '@mantine/core';
import { useEffect, useState } from 'react';
import { FailureState } from '../../../ui/page.tsx';
import { askForCode } from '../api/sign-in.ts';
import { strings } from '../strings.ts';

const WAIT_SECONDS = 30;

/** Another code, once the mail had time to arrive. */
export function AnotherCode({ email }: { email: string }) {
  const [left, setLeft] = useState(WAIT_SECONDS);
  const [sent, setSent] = useState(0);
  const [failure, setFailure] = useState<unknown>(null);
  useEffect(() => {
    const clock = setInterval(() => setLeft((seconds) => Math.max(0, seconds - 1)), 1000);
    return () => clearInterval(clock);
  }, []);
  const again = () => {
    setLeft(WAIT_SECONDS);
    setFailure(null);
    askForCode(email).then(
      () => setSent((times) => times + 1),
      (error: unknown) => setFailure(error),
    );
  };
  return (
    <div>
      {failure === null ? null : <FailureState error={failure} />}
      <p role="status">{sent > 0 && failure === null ? strings.sentAgain : ''}</p>
      <Button variant="subtle" disabled={left > 0} onClick={again}>
        {left > 0 ? strings.againIn(left) : strings.again}
      </Button>
    </div>
  );
}
