/** What a mail about a second step says. */
export const secondStepWords = {
  on: { headline: 'Your second step is on', sentence: 'From now on a code of your authenticator is asked for when somebody signs in to your account. All other sessions were ended.' },
  off: { headline: 'Your second step was turned off', sentence: 'Your account opens without a code of your authenticator again. All other sessions were ended.' },
  codes: { headline: 'You have new recovery codes', sentence: 'Ten new recovery codes were made for your account; those from before are no longer good.' },
} as const;

export const recoveryUsedWords = (left: number) => ({
  headline: 'A recovery code was used',
  sentence: `Somebody entered one of your recovery codes in place of a code of your authenticator. ${left === 0 ? 'None is left: make new ones.' : `${left} ${left === 1 ? 'is' : 'are'} left.`}`,
});
