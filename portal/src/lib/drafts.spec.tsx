import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, describe, expect, it } from 'vitest';
import { dropEverything, keepOnlyFor, readDraft, keepDraft } from './drafts.ts';
import { useIdempotencyKey, useNewId } from './idempotency-key.ts';

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

describe('the key of an act, and the id of what it creates', () => {
  const Act = () => {
    const { key, spend, renew } = useIdempotencyKey('approve-1');
    const id = useNewId('approve-1');
    return (
      <>
        <output>{`${key} ${id}`}</output>
        <button onClick={spend}>Answered</button>
        <button onClick={renew}>Taken</button>
      </>
    );
  };
  const shown = () => {
    const [key = '', id = ''] = screen.getByRole('status').textContent.split(' ');
    return { key, id };
  };
  const press = (name: string) => userEvent.click(screen.getByRole('button', { name }));

  it('stay the same over a reload until the act was answered', async () => {
    const { unmount } = render(<Act />);
    const first = shown();
    expect(first.key).toMatch(/^[0-9a-f-]{36}$/);
    unmount();
    render(<Act />);
    expect(shown()).toEqual(first);
    await press('Answered');
    expect(shown().key).not.toBe(first.key);
    expect(shown().id).not.toBe(first.id);
  });

  it('part where the key stands for something else: the record stays the same one', async () => {
    render(<Act />);
    const first = shown();
    await press('Taken');
    expect(shown().key).not.toBe(first.key);
    expect(shown().id).toBe(first.id);
  });
});
