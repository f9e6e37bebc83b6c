const COMMON = ['America/New_York', 'America/Chicago', 'America/Denver', 'America/Phoenix', 'America/Los_Angeles', 'America/Anchorage', 'Pacific/Honolulu'];
const NAMES: Readonly<Record<string, string>> = {
  'America/New_York': 'Eastern',
  'America/Chicago': 'Central',
  'America/Denver': 'Mountain',
  'America/Phoenix': 'Mountain, no daylight saving (Arizona)',
  'America/Los_Angeles': 'Pacific',
  'America/Anchorage': 'Alaska',
  'Pacific/Honolulu': 'Hawaii',
};

/** The zones of the country, and the one that is set already. */
export const timeZones = (current: string) => [...new Set([...COMMON, current])].map((value) => ({ value, label: NAMES[value] ?? value }));
