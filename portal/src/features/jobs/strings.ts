export const strings = {
  createHint: 'Take the figures from the signed contract. Homeowners, lender and inspectors are invited afterwards; the schedule of values is imported from your spreadsheet.',
  styles: [
    { value: 'percent_complete', label: 'By percent complete of each line' },
    { value: 'milestone_sums', label: 'By a fixed sum for each milestone' },
    { value: 'cost_plus', label: 'Cost plus a fee, up to a ceiling' },
  ],
  dayKinds: [
    { value: 'working', label: 'Working days' },
    { value: 'calendar', label: 'Calendar days' },
  ],
  signers: [
    { value: 'all', label: 'Every homeowner on the job' },
    { value: 'one', label: 'Any one homeowner' },
  ],
  openBookHint: 'The homeowners see your costs and mark-up on changes.',
  lawHint: "Retainage, deposits and late charges are limited by law in many states. Your contract and your counsel decide; the state's rules apply whatever is entered here.",
} as const;
