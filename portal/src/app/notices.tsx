import { Button } from '@mantine/core';
import { useNetwork } from '@mantine/hooks';
import { useOutdated } from '../lib/build.ts';
import classes from './shell.module.css';

/** What concerns every page: no connection, or a page that is older than the server. */
export function Notices() {
  const { online } = useNetwork();
  const outdated = useOutdated();
  return (
    <div role="status" className="no-print">
      {online ? null : <p className={classes['notice']}>No connection. What you type is kept in this tab; send it when the connection is back.</p>}
      {outdated ? (
        <p className={classes['notice']}>
          <span>There is a newer version of this page. Load it before you sign, approve or send something; what you typed is kept.</span>
          <Button variant="outline" onClick={() => window.location.reload()}>
            Load the page again
          </Button>
        </p>
      ) : null}
    </div>
  );
}
