import { BusinessDate, Line, PositiveCents, Rate } from '@tallypole/shared/schemas/common';
import { render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import axe from 'axe-core';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { z } from 'zod';
import { Problem } from '../../lib/problem.ts';
import { Page } from '../../testing/page.tsx';
import { DateField, FieldGroup, Form, MoneyField, PercentField, TextField, useActForm } from './index.ts';

const Contract = z.strictObject({ name: Line(60), sumCents: PositiveCents, rate: Rate, place: z.strictObject({ signedOn: BusinessDate }) });
type Values = { name: string; sumCents: unknown; rate: unknown; place: { signedOn: string } };
type Send = (values: Values, key: string) => Promise<string>;

function ContractForm({ send, onDone = () => undefined }: { send: Send; onDone?: (answer: string) => void }) {
  const initialValues: Values = { name: '', sumCents: '', rate: '', place: { signedOn: '' } };
  const act = useActForm({ name: 'contract', initialValues, schema: Contract, send, onDone });
  return (
    <main>
      <h1>A contract</h1>
      <Form act={act} submitLabel="Keep">
        <FieldGroup legend="The contract">
          <TextField field={act.field('name')} label="Name" hint="As on paper." />
          <MoneyField field={act.field('sumCents')} label="Contract sum" />
          <PercentField field={act.field('rate')} label="Retainage" />
          <DateField field={act.field('place.signedOn')} label="Signed on" near="2027-02-20" />
        </FieldGroup>
      </Form>
    </main>
  );
}
const open = (send: Send, onDone?: (answer: string) => void) => render(<Page><ContractForm send={send} onDone={onDone} /></Page>);
const field = (name: string) => screen.getByRole('textbox', { name });
const keep = () => userEvent.click(screen.getByRole('button', { name: 'Keep' }));
const fill = async (texts: Record<string, string>) => {
  for (const [name, text] of Object.entries(texts)) {
    await userEvent.clear(field(name));
    await userEvent.type(field(name), text);
  }
};
const right = { Name: 'Heron Way', 'Contract sum': '486,500', Retainage: '7.25', 'Signed on': '3/14' };

beforeEach(() => {
  sessionStorage.clear();
  document.title = 'A contract · Tallypole';
});

describe('fields', () => {
  it.each([
    ['12,400', '$12,400.00', 1_240_000],
    ['12400.5', '$12,400.50', 1_240_050],
    ['$1,234.56', '$1,234.56', 123_456],
  ])('read the sum %s and say how', async (typed, shown, cents) => {
    const send = vi.fn<Send>(() => Promise.resolve('kept'));
    open(send);
    await fill({ ...right, 'Contract sum': typed });
    expect(screen.getByText(shown)).toBeInTheDocument();
    await keep();
    await waitFor(() => expect(send.mock.calls[0]?.[0]).toMatchObject({ sumCents: cents, rate: 725 }));
  });

  it.each([
    ['3/14', 'Sunday, March 14, 2027', '2027-03-14'],
    ['12/31', 'Thursday, December 31, 2026', '2026-12-31'],
    ['3/14/28', 'Tuesday, March 14, 2028', '2028-03-14'],
    ['mar 3, 2027', 'Wednesday, March 3, 2027', '2027-03-03'],
    ['2027-03-03', 'Wednesday, March 3, 2027', '2027-03-03'],
  ])('read the day %s and say how', async (typed, shown, date) => {
    const send = vi.fn<Send>(() => Promise.resolve('kept'));
    open(send);
    await fill({ ...right, 'Signed on': typed });
    expect(screen.getByText(shown)).toBeInTheDocument();
    await keep();
    await waitFor(() => expect(send.mock.calls[0]?.[0].place.signedOn).toBe(date));
  });

  it('take a day from a calendar, which gives focus back', async () => {
    open(() => Promise.resolve('kept'));
    const button = screen.getByRole('button', { name: 'Choose from a calendar: Signed on' });
    await userEvent.click(button);
    await userEvent.click(await screen.findByRole('button', { name: /^14 February 2027/ }));
    expect(field('Signed on')).toHaveValue('February 14, 2027');
    expect(screen.getByText('Sunday, February 14, 2027')).toBeInTheDocument();
    expect(screen.queryByRole('dialog')).not.toBeInTheDocument();
    expect(button).toHaveFocus();
  });

  it('keep what cannot be read and say what would be', async () => {
    const send = vi.fn<Send>(() => Promise.resolve('kept'));
    open(send);
    await fill({ ...right, 'Contract sum': 'about ten', 'Signed on': '2/30' });
    await keep();
    expect(field('Contract sum')).toHaveValue('about ten');
    expect(field('Contract sum')).toHaveAccessibleDescription(expect.stringContaining('Enter a sum such as 12,400.50.'));
    expect(field('Signed on')).toHaveAccessibleDescription(expect.stringContaining('Enter a date such as March 3, 2027.'));
    expect(send).not.toHaveBeenCalled();
  });
});

describe('a form', () => {
  it('gathers its errors in a summary that takes focus and leads to each field; they go as they are put right', async () => {
    open(() => Promise.resolve('kept'));
    await fill({ Retainage: '5', 'Signed on': '3/14' });
    await keep();
    const summary = screen.getByRole('alert');
    expect(summary).toHaveFocus();
    expect(document.title).toBe('Error: A contract · Tallypole');
    expect([...summary.querySelectorAll('a')].map((link) => link.textContent)).toEqual(['Name: Enter something here.', 'Contract sum: Enter a sum such as 12,400.50.']);
    await userEvent.click(screen.getByRole('link', { name: /^Contract sum/ }));
    expect(field('Contract sum')).toHaveFocus();
    expect(field('Contract sum')).toHaveAttribute('aria-invalid', 'true');
    const { violations } = await axe.run(document.body, { rules: { 'color-contrast': { enabled: false } } });
    expect(violations.map(({ id, nodes }) => `${id} ${nodes[0]?.html ?? ''}`)).toEqual([]);
    await fill({ 'Contract sum': '10' });
    await waitFor(() => expect(screen.queryByRole('link', { name: /^Contract sum/ })).not.toBeInTheDocument());
  });

  it('shows what the server says at the field it points to', async () => {
    const refusal = new Problem('invalid_input', 'Something in the form needs another look.', 400, [{ pointer: '/place/signedOn', code: 'late', message: 'Must not be after today.' }]);
    open(() => Promise.reject(refusal));
    await fill(right);
    await keep();
    expect(await screen.findByRole('link', { name: 'Signed on: Must not be after today.' })).toBeInTheDocument();
    expect(field('Signed on')).toHaveAccessibleDescription(expect.stringContaining('Must not be after today.'));
    expect(field('Name')).toHaveValue('Heron Way');
  });

  it('sends once however often it is pressed, and the same key again after a failure', async () => {
    const offline = new Problem('offline', 'No answer came.', 0);
    let answer: (kept: string) => void = () => undefined;
    const send = vi.fn<Send>().mockRejectedValueOnce(offline).mockImplementation(() => new Promise((done) => (answer = done)));
    const onDone = vi.fn();
    open(send, onDone);
    await fill(right);
    await keep();
    expect(await screen.findByText('No answer came.')).toBeInTheDocument();
    const form = document.querySelector('form');
    for (let i = 0; i < 3; i += 1) form?.dispatchEvent(new Event('submit', { bubbles: true, cancelable: true }));
    await waitFor(() => expect(send).toHaveBeenCalledTimes(2));
    expect(send.mock.calls[1]?.[1]).toBe(send.mock.calls[0]?.[1]);
    answer('kept');
    await waitFor(() => expect(onDone).toHaveBeenCalledWith('kept'));
    await waitFor(() => expect(document.title).toBe('A contract · Tallypole'));
  });

  it('finds what was typed after a reload, and forgets it once it was sent', async () => {
    const { unmount } = open(() => Promise.resolve('kept'));
    await fill(right);
    unmount();
    const again = open(() => Promise.resolve('kept'));
    expect(field('Name')).toHaveValue('Heron Way');
    expect(field('Contract sum')).toHaveValue('486,500.00');
    expect(field('Signed on')).toHaveValue('March 14, 2027');
    await keep();
    await waitFor(() => expect(sessionStorage.getItem('tally-draft:contract')).toBeNull());
    again.unmount();
    open(() => Promise.resolve('kept'));
    expect(field('Name')).toHaveValue('');
  });
});
