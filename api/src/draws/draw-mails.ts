import { Inject, Injectable } from '@nestjs/common';
import { formatMoney } from '@tallypole/shared/money';
import type { Role } from '@tallypole/shared/schemas/roles';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { writtenBusinessDate } from '../common/written-date.ts';
import { NoticeRepository, type Notice } from '../notices/notice.repository.ts';
import type { NoticeKind } from '../notices/templates.ts';
import { ToTellRepository, type Told } from '../payments/to-tell.repository.ts';
import type { DrawFacts } from './draw-facts.ts';
import type { DrawFigures } from './draw-figures.ts';

type About = Pick<DrawFacts, 'job' | 'draw'>;
type Kinds = Partial<Record<Role, NoticeKind>>;

const OFFICE = { principal: 'draw-approved', manager: 'draw-approved', books: 'draw-approved' } as const;

/** The mails about a draw, each with its figures. */
@Injectable()
export class DrawMails {
  constructor(
    private readonly notices: NoticeRepository,
    private readonly toTell: ToTellRepository,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  submitted(tx: Tx, about: About, figures: DrawFigures): Promise<void> {
    const kinds: Kinds = figures.loanCents > 0 ? { homeowner: 'draw-submitted', lender: 'draw-to-review' } : { homeowner: 'draw-submitted' };
    return this.post(tx, about, kinds, { ...this.figures(figures), throughOn: writtenBusinessDate(about.draw.throughOn) });
  }

  returned(tx: Tx, about: About, by: string, reason: string): Promise<void> {
    return this.post(tx, about, { principal: 'draw-returned', manager: 'draw-returned', books: 'draw-returned' }, { by, reason });
  }

  /** The office and the other homeowners hear of an objection; whoever objected knows. */
  objected(tx: Tx, about: About, figures: DrawFigures, objection: { by: string; byId: string; line: string; objectedCents: number; reason: string }): Promise<void> {
    const kinds: Kinds = { principal: 'draw-objected', manager: 'draw-objected', books: 'draw-objected', homeowner: 'draw-objected-homeowner' };
    const { by, line, reason, objectedCents } = objection;
    return this.post(tx, about, kinds, { ...this.figures(figures), by, line, reason, objected: formatMoney(objectedCents) }, ({ personId }) => personId !== objection.byId);
  }

  approved(tx: Tx, about: About, figures: DrawFigures, dueOn: string): Promise<void> {
    const lender: Kinds = figures.loanCents > 0 ? { lender: 'draw-to-fund' } : {};
    const blocker = about.draw.reviewState === 'allowed' ? 'You can fund it now.' : 'Your inspection and allowance come before the funding.';
    const data = { ...this.figures(figures), dueOn: writtenBusinessDate(dueOn, true), dueOnShort: writtenBusinessDate(dueOn).replace(/, \d{4}$/, ''), blocker };
    return this.post(tx, about, { ...OFFICE, homeowner: 'draw-approved-homeowner', ...lender }, data);
  }

  splitChanged(tx: Tx, about: About, figures: DrawFigures, dueOn: string): Promise<void> {
    return this.post(tx, about, { homeowner: 'draw-split-changed' }, { ...this.figures(figures), dueOn: writtenBusinessDate(dueOn, true) });
  }

  funded(tx: Tx, about: About, funding: { by: string; amountCents: number; fundedOn: string; reference: string; way: string }): Promise<void> {
    const { by, reference, way } = funding;
    const data = { by, reference, way, amount: formatMoney(funding.amountCents), fundedOn: writtenBusinessDate(funding.fundedOn) };
    return this.post(tx, about, { principal: 'draw-funded', manager: 'draw-funded', books: 'draw-funded' }, data);
  }

  private figures({ computed, homeownerCents, loanCents }: DrawFigures) {
    const { summary } = computed;
    return {
      due: formatMoney(summary.dueNowCents),
      homeowner: formatMoney(homeownerCents),
      loan: formatMoney(loanCents),
      retainage: formatMoney(summary.retainageHeldCents),
      contractSum: formatMoney(summary.contractSumTodayCents),
      left: formatMoney(summary.leftToBillCents),
    };
  }

  private async post(tx: Tx, { job, draw }: About, kinds: Kinds, data: Notice['data'], wanted: (told: Told) => boolean = () => true): Promise<void> {
    const people = (await this.toTell.people(tx, job.id, Object.keys(kinds) as Role[])).filter(wanted);
    const url = `${this.configuration.PUBLIC_URL}/jobs/${job.id}/draws/${draw.id}`;
    const all = { ...data, jobName: job.name, firmName: job.firmName, title: `Draw ${draw.number}`, url };
    const notices = people.flatMap(({ personId, role }) => {
      const kind = kinds[role];
      return kind ? [{ firmId: job.firmId, jobId: job.id, kind, to: { personId }, data: all }] : [];
    });
    await this.notices.postAll(tx, notices);
  }
}
