import { date as dateFigure, given, quantity, step, text, type Step } from '../arithmetic/index.ts';
import { addDays, nextBusinessDay, type CalendarName, type DayKind } from './calendars.ts';
import type { BusinessDate } from './dates.ts';

export interface DueTerms {
  /** The clock starts at this event, which the contract names. */
  startsAt: 'request' | 'approval' | 'milestone_proven' | 'inspection';
  days: number;
  dayKind: DayKind;
  /** A due date on a weekend or holiday moves to the next business day. */
  moveToBusinessDay: boolean;
  calendar: CalendarName;
}

const EVENTS = { request: 'request received', approval: 'approval', milestone_proven: 'milestone proven', inspection: 'inspection' } as const;

/** When a draw is due: start + days, moved off a closed day where the terms say so. Nothing is deemed approved by it. Throws InvalidInput. */
export function dueDate(terms: DueTerms, startedOn: BusinessDate): { dueOn: BusinessDate; steps: Step } {
  const counted = addDays(terms.dayKind, startedOn, terms.days, terms.calendar);
  const dueOn = terms.moveToBusinessDay ? nextBusinessDay(terms.calendar, counted) : counted;
  const inputs = [
    given(EVENTS[terms.startsAt], dateFigure(startedOn)),
    given('days', quantity(terms.days, `${terms.dayKind} days`)),
    ...(dueOn === counted ? [] : [given('moved', text(`${counted} is not a business day`))]),
  ];
  return { dueOn, steps: step('Due', 'start + days, moved to a business day where the terms say so', dateFigure(dueOn), inputs) };
}
