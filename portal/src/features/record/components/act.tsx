import type { ReactNode } from 'react';

/** A button with a line that says what it does, beside it or on a phone below. */
export const Act = ({ explain, children }: { explain: string; children: ReactNode }) => (
  <div style={{ display: 'flex', flexWrap: 'wrap', alignItems: 'center', gap: '4px 16px', marginBottom: 16 }}>
    {children}
    <span className="quiet">{explain}</span>
  </div>
);
