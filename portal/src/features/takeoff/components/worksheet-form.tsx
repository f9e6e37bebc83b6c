import { NativeSelect, TextInput } from '@mantine/core';
import { InvalidInput } from '@tallypole/shared/arithmetic';
import { formatLength, lumberSizes, parseLength, type LumberSize } from '@tallypole/shared/takeoff';
import { strings } from '../strings.ts';
import type { JoistEntry, Worksheet } from '../worksheet.ts';
import classes from './takeoff.module.css';

interface Props {
  sheet: Worksheet;
  onChange: (sheet: Worksheet) => void;
  problem: InvalidInput | null;
}

const SPACINGS = ['12', '16', '19.2', '24'];

/** What the two sides share, and the joists of each. */
export function WorksheetForm({ sheet, onChange, problem }: Props) {
  const set = (part: Partial<Worksheet>) => onChange({ ...sheet, ...part });
  const at = (field: string) => (problem && (problem.field === field || problem.field.endsWith(`.${field}`)) ? said(problem) : undefined);
  const length = (name: 'run' | 'spanA' | 'spanB' | 'postSpacing', label: string, hint?: string) => (
    <TextInput label={label} description={hint ?? read(sheet[name])} value={sheet[name]} onChange={({ currentTarget }) => set({ [name]: currentTarget.value })} error={at(name)} autoComplete="off" />
  );
  return (
    <>
      <fieldset className={classes['place']}>
        <legend>{strings.place}</legend>
        <p className="quiet">{strings.lengthHint}</p>
        <div className={classes['fields']}>
          {length('run', strings.run)}
          {length('spanA', strings.spanA)}
          {length('spanB', strings.spanB, sheet.spanB.trim() === '' ? strings.spanBHint : undefined)}
        </div>
        {sheet.spanB.trim() === '' ? null : (
          <div className={classes['fields']}>
            <NativeSelect label={strings.girderSize} description={strings.girder} value={sheet.girderSize} data={lumberSizes} onChange={({ currentTarget }) => set({ girderSize: currentTarget.value as LumberSize })} />
            <TextInput label={strings.girderPlies} description={strings.girder} value={sheet.girderPlies} onChange={({ currentTarget }) => set({ girderPlies: currentTarget.value })} error={at('girderPlies') ?? at('plies')} inputMode="numeric" autoComplete="off" />
            {length('postSpacing', strings.postSpacing)}
          </div>
        )}
        <div className={classes['fields']}>
          <TextInput label={strings.faceWidth} description={strings.deck} value={sheet.faceWidth} onChange={({ currentTarget }) => set({ faceWidth: currentTarget.value })} error={at('faceWidth')} inputMode="decimal" autoComplete="off" rightSection="in" />
          <TextInput label={strings.waste} description={strings.deck} value={sheet.wastePercent} onChange={({ currentTarget }) => set({ wastePercent: currentTarget.value })} error={at('wastePercent')} inputMode="numeric" autoComplete="off" rightSection="%" />
        </div>
      </fieldset>
      <div className={classes['sides']}>
        <Side name="drawn" joists={sheet.drawn} onChange={(drawn) => set({ drawn })} at={at} />
        <Side name="proposed" joists={sheet.proposed} onChange={(proposed) => set({ proposed })} at={at} />
      </div>
    </>
  );
}

function Side({ name, joists, onChange, at }: { name: 'drawn' | 'proposed'; joists: JoistEntry; onChange: (joists: JoistEntry) => void; at: (field: string) => string | undefined }) {
  const set = (part: Partial<JoistEntry>) => onChange({ ...joists, ...part });
  return (
    <fieldset>
      <legend>{strings[name]}</legend>
      <div className={classes['fields']}>
        <NativeSelect label={strings.size} value={joists.size} data={lumberSizes} onChange={({ currentTarget }) => set({ size: currentTarget.value as LumberSize })} />
        <NativeSelect label={strings.spacing} value={joists.spacing} data={SPACINGS} onChange={({ currentTarget }) => set({ spacing: currentTarget.value })} />
        <TextInput label={strings.extras} value={joists.extras} onChange={({ currentTarget }) => set({ extras: currentTarget.value })} error={at(`${name}.extras`)} inputMode="numeric" autoComplete="off" />
        <TextInput label={strings.blockingRows} value={joists.blockingRows} onChange={({ currentTarget }) => set({ blockingRows: currentTarget.value })} error={at(`${name}.blockingRows`)} inputMode="numeric" autoComplete="off" />
      </div>
    </fieldset>
  );
}

/** How a length was read, for people; nothing while it can't be. */
function read(typed: string): string {
  try {
    return formatLength(parseLength(typed));
  } catch (error) {
    if (error instanceof InvalidInput) return '';
    throw error;
  }
}

export const said = ({ rule }: InvalidInput): string => `${rule.charAt(0).toUpperCase()}${rule.slice(1)}.`;
