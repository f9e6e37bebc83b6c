import { NativeSelect } from '@mantine/core';
import { floorLoads, gradeNames, screenSpan, speciesNames, type Grade, type Species } from '@tallypole/shared/span';
import { formatLength, type FloorGeometry } from '@tallypole/shared/takeoff';
import { Figure } from '../../../ui/figure.tsx';
import { Note } from '../../../ui/page.tsx';
import { strings } from '../strings.ts';
import type { Worksheet } from '../worksheet.ts';
import classes from './takeoff.module.css';

/** Compares the longest proposed clear span with the screen, which can stop and never clears. */
export function Screen({ sheet, geometry, onChange }: { sheet: Worksheet; geometry: FloorGeometry; onChange: (part: Partial<Worksheet>) => void }) {
  const longest = Math.max(...geometry.clearSpans.map(Number));
  const { verdict, span, caution } = screenSpan({ kind: 'sawn_joist', input: { species: sheet.species, grade: sheet.grade, size: geometry.joists.size, spacing: geometry.joists.spacing, ...floorLoads } }, longest);
  const reach = span ? formatLength(String(span.spanInches)) : '';
  return (
    <>
      <div className={classes['fields']}>
        <NativeSelect label={strings.species} value={sheet.species} data={speciesNames} onChange={({ currentTarget }) => onChange({ species: currentTarget.value as Species })} />
        <NativeSelect label={strings.grade} value={sheet.grade} data={gradeNames} onChange={({ currentTarget }) => onChange({ grade: currentTarget.value as Grade })} />
      </div>
      <div role="status">{verdict === 'beyond_the_screen' ? <Note>{strings.verdict.beyond_the_screen(reach)}</Note> : <p>{strings.verdict[verdict]}</p>}</div>
      {span ? (
        <p>
          {strings.reach} <Figure steps={span.steps} label={strings.screen}>{reach}</Figure>
        </p>
      ) : null}
      <p className="quiet">{caution}</p>
    </>
  );
}
