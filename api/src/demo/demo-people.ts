/** The people of the demo's invented jobs, one per role; they sign in by a mailed code like everybody else. */
export const demoPeople = [
  { name: 'Marit Halvorsen', email: 'marit@halvorsen-build.example', role: 'principal', what: 'Owner of Halvorsen Building Co.' },
  { name: 'Dev Okafor', email: 'dev@halvorsen-build.example', role: 'manager', what: 'Prices changes and runs the jobs' },
  { name: 'Lupe Arana', email: 'lupe@halvorsen-build.example', role: 'site', what: 'Superintendent on Juniper Hill' },
  { name: 'Wes Tran', email: 'wes@halvorsen-build.example', role: 'books', what: 'Sends draws and records payments' },
  { name: 'Ines Moreau', email: 'ines@moreau.example', role: 'homeowner', what: 'Builds a house at 22 Juniper Hill' },
  { name: 'Theo Moreau', email: 'theo@moreau.example', role: 'homeowner', what: 'Must sign as well' },
  { name: 'Ruth Calloway', email: 'ruth@fallbrook-bank.example', role: 'lender', what: 'Draw administrator at Fallbrook Savings' },
  { name: 'Omar Haddad', email: 'omar@haddad-inspection.example', role: 'inspector', what: "The bank's inspector" },
  { name: 'Greta Lindqvist', email: 'greta@lindqvist-structural.example', role: 'designer', what: 'Engineer of record' },
  { name: 'Sam Pruitt', email: 'sam@pruitt-and-daughter.example', role: 'principal', what: 'Owner of a second firm: sees nothing of the first' },
] as const;
