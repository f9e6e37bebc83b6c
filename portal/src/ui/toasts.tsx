import { Notifications } from '@mantine/notifications';
import '@mantine/notifications/styles.css';

/** Where toasts appear. */
const Toasts = () => <Notifications position="bottom-center" />;
export default Toasts;
