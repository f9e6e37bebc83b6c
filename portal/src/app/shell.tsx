import type { Me } from '@tallypole/shared/schemas/auth';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { Notices } from './notices.tsx';
import { PersonMenu } from './person-menu.tsx';
import classes from './shell.module.css';

/** The frame of every page: where I am, who I am, and the way out. */
export function Shell({ me, children }: { me: Me; children: ReactNode }) {
  return (
    <>
      <a className="skip" href="#main">
        Skip to the page
      </a>
      <header className={`${classes['top'] ?? ''} no-print`}>
        <Link to="/jobs" className={classes['name']}>
          <img src="/icon.svg" alt="" width={22} height={22} />
          Tallypole
        </Link>
        <div className={classes['side']}>
          <PersonMenu me={me} />
        </div>
      </header>
      <Notices />
      {children}
    </>
  );
}
