/** Where to after signing in: only a path of our own is gone to. */
export const safePath = (to: string | null): string => (to && /^\/(?![/\\])/.test(to) ? to : '/jobs');
