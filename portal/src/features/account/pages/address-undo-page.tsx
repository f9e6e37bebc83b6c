import { useEffect, useState } from 'react';
import { useLocation, useNavigate } from 'react-router-dom';
import { dropEverything } from '../../../lib/drafts.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { LinkButton } from '../../../ui/link-button.tsx';
import { Note, PageHead } from '../../../ui/page.tsx';
import { undoAddress } from '../api/account.ts';
import { undoStrings as strings } from '../strings.ts';
import classes from '../components/account.module.css';

/** Where the mail to an old address leads. Opening it does nothing; the button does. */
export function Component() {
  const { hash, pathname } = useLocation();
  const navigate = useNavigate();
  const [token, setToken] = useState('');
  const [email, setEmail] = useState<string | null>(null);
  if (hash !== '' && hash.slice(1) !== token) setToken(hash.slice(1));
  // the token leaves the address, so that it stays in no history
  useEffect(() => {
    if (hash !== '') void navigate(pathname, { replace: true });
  }, [hash, pathname, navigate]);
  if (hash !== '') return null;
  const done = (answer: { email: string }) => {
    dropEverything();
    queryClient.clear();
    setEmail(answer.email);
  };
  return (
    <main className={`${classes['bare'] ?? ''} ${classes['stack'] ?? ''}`} id="main">
      {email === null ? (
        <>
          <PageHead title={strings.title}>
            <p>{strings.lead}</p>
          </PageHead>
          {token === '' ? (
            <Note>{strings.noToken}</Note>
          ) : (
            <>
              <p>{strings.what}</p>
              <ActButton scope="address-undo" label={strings.undo} about={strings.title} variant="filled" send={() => undoAddress(token)} onDone={done} />
            </>
          )}
        </>
      ) : (
        <>
          <PageHead title={strings.doneTitle}>
            <p>{strings.done(email)}</p>
          </PageHead>
          <LinkButton to="/sign-in">{strings.signIn}</LinkButton>
        </>
      )}
    </main>
  );
}
