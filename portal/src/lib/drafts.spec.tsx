import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, describe, expect, it } from 'vitest';
import { dropEverything, keepOnlyFor, readDraft, keepDraft } from './drafts.ts';
import { useIdempotencyKey } from './idempotency-key.ts';

beforeEach(() => sessionStorage.clear());

describe('drafts', () => {
  it('survive a new sign-in of the same person and go with another one', () => {
    keepOnlyFor('ann');
    keepDraft('create-job', { name: '3 Heron Way' });
    expect(keepOnlyFor('ann')).toBe(false);
    expect(readDraft('create-job')).toEqual({ name: '3 Heron Way' });
    expect(keepOnlyFor('ben')).toBe(true);
    expect(readDraft('create-job')).toBeNull();
  });

  it('go at sign-out, and one that cannot be read is none', () => {
    keepDraft('create-job', { name: '3 Heron Way' });
    sessionStorage.setItem('tally-draft:broken', '{');
    expect(readDraft('broken')).toBeNull();
    dropEverything();
    expect(readDraft('create-job')).toBeNull();
  });
});

describe('an idempotency key', () => {
  const Key = () => {
    const { key, spend } = useIdempotencyKey('approve-1');
    return <button onClick={spend}>{key}</button>;
  };

  it('stays the same over a reload until the act was answered', async () => {
    const { unmount } = render(<Key />);
    const first = screen.getByRole('button').textContent;
    expect(first).toMatch(/^[0-9a-f-]{36}$/);
    unmount();
    render(<Key />);
    expect(screen.getByRole('button').textContent).toBe(first);
    await userEvent.click(screen.getByRole('button'));
    expect(screen.getByRole('button').textContent).not.toBe(first);
  });
});
