import { given, money, rate, step } from '@tallypole/shared/arithmetic';
import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import axe from 'axe-core';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { Page } from '../testing/page.tsx';
import { Figure } from './figure.tsx';
import { Money } from './money.tsx';

// due 90.00 = work 100.00 less 10 % retained
const retained = step('Retained', 'work × rate', money(1_000), [given('Work', money(10_000)), given('Retainage', rate(1_000))], '10.004');
const due = step('Due now', 'work − retained', money(9_000), [
  given('Work', money(10_000), { record: 'draw', id: 'd-3', label: 'Draw 3' }),
  retained,
  given('Allowance', money(0), { record: 'terms', id: 't', label: 'Terms of the contract' }),
]);
const Due = () => (
  <Page at="/jobs/j-1/draws" path="/jobs/:jobId/draws">
    <Figure label="Due now" steps={due}>
      <Money cents={9_000} />
    </Figure>
  </Page>
);
const narrow = (yes: boolean) => vi.spyOn(window, 'matchMedia').mockImplementation((query) => ({ matches: yes && query.includes('max-width'), media: query, onchange: null, addListener() {}, removeListener() {}, addEventListener() {}, removeEventListener() {}, dispatchEvent: () => false }));

afterEach(() => vi.restoreAllMocks());

describe('a figure', () => {
  it('opens its arithmetic by keyboard, names rule and rounding, leads to the records, and gives focus back', async () => {
    const user = userEvent.setup();
    render(<Due />);
    await user.tab();
    const button = screen.getByRole('button', { name: /^\$90\.00\s?, Due now: how it is worked out$/ });
    expect(button).toHaveFocus();
    await user.keyboard('{Enter}');
    const dialog = await screen.findByRole('dialog', { name: /Due now: how it is worked out/ });
    expect(button).toHaveAttribute('aria-expanded', 'true');
    expect(within(dialog).getByText('work − retained')).toBeInTheDocument();
    expect(within(dialog).getByRole('link', { name: 'Draw 3' })).toHaveAttribute('href', '/jobs/j-1/draws/d-3');
    expect(within(dialog).getByText('Terms of the contract').closest('a')).toBeNull();
    await user.keyboard('{Escape}');
    expect(screen.queryByRole('dialog')).not.toBeInTheDocument();
    expect(button).toHaveFocus();
  });

  it('opens deeper steps one by one', async () => {
    const user = userEvent.setup();
    render(<Due />);
    await user.click(screen.getByRole('button'));
    const inner = within(await screen.findByRole('dialog')).getByText('Retained').closest('details');
    expect(inner).not.toHaveAttribute('open');
    await user.click(screen.getByText('Retained'));
    expect(inner).toHaveAttribute('open');
    expect(within(inner!).getByText('work × rate; exactly 10.004 before rounding')).toBeInTheDocument();
    expect(within(inner!).getByText('10 %')).toBeInTheDocument();
    const { violations } = await axe.run(document.body, { rules: { 'color-contrast': { enabled: false }, region: { enabled: false } } });
    expect(violations.map(({ id, nodes }) => `${id} ${nodes[0]?.html ?? ''}`)).toEqual([]);
  });

  it('comes from below on a phone', async () => {
    narrow(true);
    render(<Due />);
    await userEvent.click(screen.getByRole('button'));
    const sheet = await screen.findByRole('dialog', { name: /^Due now/ });
    expect(sheet.className).toContain('Drawer');
    expect(within(sheet).getByRole('button', { name: 'Close' })).toBeInTheDocument();
  });

  it('is plain where there is no arithmetic', () => {
    render(<Page><Figure label="Due now" steps={null}><Money cents={null} /></Figure></Page>);
    expect(screen.queryByRole('button')).not.toBeInTheDocument();
    expect(screen.getByText('–')).toBeInTheDocument();
  });
});
