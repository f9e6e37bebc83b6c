import type { Draw } from '@tallypole/shared/schemas/draws';
import { PaymentTable } from '../../../ui/payment-table.tsx';
import { Section } from '../../../ui/page.tsx';
import { strings } from '../strings.ts';

export const DrawPayments = ({ draw }: { draw: Draw }) =>
  draw.payments.length === 0 ? null : (
    <Section title={strings.payments}>
      <PaymentTable payments={draw.payments} />
    </Section>
  );
