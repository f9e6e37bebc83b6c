import type { InspectorFor } from '@tallypole/shared/schemas/guest-links';

/** Whose inspector it is, as it is said in a mail. */
export const whoseInspector: Readonly<Record<InspectorFor, string>> = {
  lender: 'the lender\'s inspector',
  homeowner: 'the homeowner\'s inspector',
  town: 'the town\'s inspector',
  firm: 'an inspector whom the builder asked',
};

/** "Framing", "Framing and Roof", "Framing, Roof and Windows". */
export const listed = (names: readonly string[]): string => (names.length < 2 ? names.join('') : `${names.slice(0, -1).join(', ')} and ${names.at(-1) ?? ''}`);
