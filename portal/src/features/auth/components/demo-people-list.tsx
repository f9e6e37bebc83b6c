import type { DemoPeople } from '@tallypole/shared/schemas/auth';
import { useState } from 'react';
import { Problem } from '../../../lib/problem.ts';
import { FailureState } from '../../../ui/page.tsx';
import { askForCode } from '../api/sign-in.ts';
import { strings } from '../strings.ts';
import classes from './demo-people-list.module.css';

/** The people of the demo: choosing one mails them a code, like everybody else. */
export function DemoPeopleList({ demo, onSent }: { demo: DemoPeople; onSent: (email: string) => void }) {
  const [problem, setProblem] = useState<Problem | null>(null);
  const choose = (email: string) => {
    askForCode(email).then(
      ({ sentTo }) => onSent(sentTo),
      (error: unknown) => setProblem(error instanceof Problem ? error : null),
    );
  };
  return (
    <section aria-label={strings.demoTitle}>
      <h2>{strings.demoTitle}</h2>
      <p className="quiet" style={{ margin: '4px 0 12px' }}>
        {strings.demoHint}{' '}
        {demo.mailPageUrl ? (
          <a href={demo.mailPageUrl} target="_blank" rel="noreferrer">
            {strings.mailPage}
          </a>
        ) : (
          strings.mailPage
        )}
        .
      </p>
      {problem ? <FailureState error={problem} /> : null}
      <ul className={classes['list']}>
        {demo.people.map((person) => (
          <li key={person.email}>
            <button type="button" className={classes['person']} onClick={() => choose(person.email)}>
              <span>{person.name}</span>
              <span className="quiet">
                {person.role} · {person.what}
              </span>
            </button>
          </li>
        ))}
      </ul>
    </section>
  );
}
