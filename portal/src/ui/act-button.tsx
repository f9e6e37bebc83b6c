import { Button, Modal, type ButtonVariant } from '@mantine/core';
import { useState, type ReactNode } from 'react';
import { useIdempotencyKey } from '../lib/idempotency-key.ts';
import { FailureState } from './page.tsx';
import classes from './page.module.css';

interface ActButtonProps<Answer> {
  /** Names the act and what it is done to, in its state: the idempotency key is kept under it. */
  scope: string;
  label: string;
  /** Whom or what it concerns, for those who hear the button without its row. */
  about: string;
  send: (idempotencyKey: string) => Promise<Answer>;
  onDone: (answer: Answer) => void;
  variant?: ButtonVariant;
  /** Where it can't be undone: what will happen. It asks once, and the button in the question names the act. */
  question?: { title: string; text: ReactNode; confirm: string };
}

/** A button that performs one act by itself, without a form. */
export function ActButton<Answer>({ scope, label, about, send, onDone, variant = 'outline', question }: ActButtonProps<Answer>) {
  const idempotency = useIdempotencyKey(scope);
  const [busy, setBusy] = useState(false);
  const [asking, setAsking] = useState(false);
  const [failure, setFailure] = useState<unknown>(null);
  const perform = async () => {
    if (busy) return;
    setBusy(true);
    setFailure(null);
    try {
      const answer = await send(idempotency.key);
      idempotency.spend();
      setAsking(false);
      onDone(answer);
    } catch (error) {
      setFailure(error);
    } finally {
      setBusy(false);
    }
  };
  const failed = failure === null ? null : <FailureState error={failure} />;
  return (
    <>
      <Button variant={variant} loading={busy && !question} aria-label={`${label}: ${about}`} onClick={() => (question ? setAsking(true) : void perform())}>
        {label}
      </Button>
      {question ? null : failed}
      {question && asking ? (
        // its parts one by one: the header that comes with the whole would be a second banner of the page
        <Modal.Root opened onClose={() => setAsking(false)} centered>
          <Modal.Overlay />
          <Modal.Content>
            <Modal.Body className={classes['question']}>
              <div className={classes['questionHead']}>
                <Modal.Title>{question.title}</Modal.Title>
                <Modal.CloseButton size="lg" aria-label="Close" />
              </div>
              <div>{question.text}</div>
              {failed}
              <div>
                <Button color="oxide" loading={busy} onClick={() => void perform()}>
                  {question.confirm}
                </Button>
              </div>
            </Modal.Body>
          </Modal.Content>
        </Modal.Root>
      ) : null}
    </>
  );
}
