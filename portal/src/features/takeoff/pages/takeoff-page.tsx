import { InvalidInput } from '@tallypole/shared/arithmetic';
import type { PriceLine } from '@tallypole/shared/pricing';
import { depthPrompts, takeoffDifference } from '@tallypole/shared/takeoff';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { v7 } from 'uuid';
import { keepDraft, readDraft } from '../../../lib/drafts.ts';
import { useJob } from '../../../lib/job.ts';
import { Note, PageHead, Section } from '../../../ui/page.tsx';
import { Difference } from '../components/difference.tsx';
import { PlanDrawing } from '../components/plan-drawing.tsx';
import { Quantities } from '../components/quantities.tsx';
import { Screen } from '../components/screen.tsx';
import { said, WorksheetForm } from '../components/worksheet-form.tsx';
import { strings } from '../strings.ts';
import { count, emptyWorksheet, type Counted, type Worksheet } from '../worksheet.ts';

/** A floor as drawn and as proposed: quantities, a drawing, the screen, and the difference as lines of a change. */
export function Component() {
  const job = useJob();
  const draft = `takeoff-${job.id}`;
  const [sheet, setSheet] = useState<Worksheet>(() => ({ ...emptyWorksheet, ...readDraft<Worksheet>(draft) }));
  const navigate = useNavigate();
  const change = (next: Worksheet) => {
    setSheet(next);
    keepDraft(draft, next);
  };
  const counted = count(sheet);
  const write = (lines: PriceLine[]) => {
    const editor = `change-new-${job.id}`;
    // the editor goes on with what was typed there already
    keepDraft(editor, { ...readDraft(editor), structural: true, lines: lines.map((line) => ({ ...line, id: v7() })) });
    void navigate(`/jobs/${job.id}/changes/new`);
  };
  return (
    <>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.explain}</p>
      </PageHead>
      <WorksheetForm sheet={sheet} onChange={change} problem={counted instanceof InvalidInput ? counted : null} />
      {counted instanceof InvalidInput ? <Note>{said(counted)}</Note> : <Results sheet={sheet} counted={counted} onChange={(part) => change({ ...sheet, ...part })} onWrite={write} />}
    </>
  );
}

function Results({ sheet, counted, onChange, onWrite }: { sheet: Worksheet; counted: Counted; onChange: (part: Partial<Worksheet>) => void; onWrite: (lines: PriceLine[]) => void }) {
  const { drawn, proposed, geometry } = counted;
  const asks = depthPrompts(geometry.drawn, geometry.proposed);
  return (
    <>
      <Section title={strings.plan}>
        <PlanDrawing geometry={geometry.proposed} />
      </Section>
      <Section title={strings.screen}>
        <Screen sheet={sheet} geometry={geometry.proposed} onChange={onChange} />
      </Section>
      <Section title={strings.quantities}>
        <Quantities drawn={drawn} proposed={proposed} />
      </Section>
      {asks.length > 0 ? (
        <Section title={strings.asks}>
          <p className="quiet">{strings.asksHint}</p>
          <ul>
            {asks.map(({ topic, question }) => <li key={topic}>{question}</li>)}
          </ul>
        </Section>
      ) : null}
      <Section title={strings.differs}>
        <Difference difference={takeoffDifference(drawn, proposed)} costs={sheet.costs} onCost={(key, cost) => onChange({ costs: { ...sheet.costs, [key]: cost } })} onWrite={onWrite} />
      </Section>
    </>
  );
}
