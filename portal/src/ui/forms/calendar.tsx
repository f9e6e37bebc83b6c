import { DatePicker } from '@mantine/dates';
import '@mantine/dates/styles.css';

/** A month to choose a near day from; loaded when it is first opened. */
const Calendar = ({ value, near, onChange }: { value: string | null; near: string; onChange: (date: string) => void }) => (
  <DatePicker
    value={value}
    defaultDate={value ?? near}
    onChange={(date) => date && onChange(date)}
    firstDayOfWeek={0}
    // days of other months and weekends in paler colors can't be read by everybody
    hideOutsideDates
    weekendDays={[]}
    ariaLabels={LABELS}
    size="md"
  />
);
const LABELS = {
  previousMonth: 'Month before', nextMonth: 'Month after',
  previousYear: 'Year before', nextYear: 'Year after', previousDecade: 'Ten years before', nextDecade: 'Ten years after',
};
export default Calendar;
