import { describe, expect, it } from '@jest/globals';
import { blockerOf } from './blocker.ts';

const ready = { state: 'approved', reviewState: 'allowed', conditions: '', provenCents: 100, billedCents: 100, approved: true } as const;

describe('what keeps a draw from being funded', () => {
  it.each([
    ['nothing', {}, null],
    ['it went back', { state: 'returned', reviewState: 'ordered', approved: false }, 'returned'],
    ['more is billed than was seen', { reviewState: 'ordered', provenCents: 99 }, 'unproven'],
    ['nobody inspected', { reviewState: 'ordered' }, 'not_inspected'],
    ['nobody allowed', { reviewState: 'inspected' }, 'not_allowed'],
    ['the homeowners have not approved', { state: 'submitted', approved: false, conditions: 'Title.' }, 'not_approved'],
    ['a condition is open', { conditions: 'Title.' }, 'conditions'],
  ] as const)('%s', (_why, facts, blocker) => {
    expect(blockerOf({ ...ready, ...facts })).toBe(blocker);
  });
});
