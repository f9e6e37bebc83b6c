import { DatePicker } from '@mantine/dates';
import '@mantine/dates/styles.css';

/** A month to choose a near day from; loaded when it is first opened. */
const Calendar = ({ value, near, onChange }: { value: string | null; near: string; onChange: (date: string) => void }) => (
  <DatePicker value={value} defaultDate={value ?? near} onChange={(date) => date && onChange(date)} firstDayOfWeek={0} size="md" />
);
export default Calendar;
