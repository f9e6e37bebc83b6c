import type { GuestVisit } from '@tallypole/shared/schemas/guest-links';
import { writtenInstant } from '../../../lib/dates.ts';
import { Section } from '../../../ui/page.tsx';
import { PhotoGrid } from '../../../ui/photo-grid/photo-grid.tsx';
import { StateTag, type Meaning } from '../../../ui/state-tag.tsx';
import { guestPhotoUrl } from '../api/guest.ts';
import { strings } from '../strings.ts';
import { AddPhotos } from './add-photos.tsx';
import classes from './guest.module.css';
import { InspectForm, type Who } from './inspect-form.tsx';

const MEANING: Readonly<Record<GuestVisit['milestones'][number]['state'], Meaning>> = { upcoming: 'neutral', under_way: 'neutral', claimed: 'waits', proven: 'settled' };

interface MilestoneToSeeProps {
  visit: GuestVisit;
  milestone: GuestVisit['milestones'][number];
  who: Who;
  onPhoto: () => void;
  onAnswer: (visit: GuestVisit, who: Who) => void;
}

/** One milestone of the link: what belongs to it, its photos, then what is asked. */
export function MilestoneToSee({ visit, milestone, who, onPhoto, onAnswer }: MilestoneToSeeProps) {
  const { name, state, claimedAt, claimedBy, parts, photos, answeredAt } = milestone;
  return (
    <Section title={name}>
      <div className={classes['milestone']}>
        <div>
          <StateTag meaning={MEANING[state]}>{strings.states[state]}</StateTag>
        </div>
        {claimedAt ? <p className="quiet">{strings.claimed(writtenInstant(claimedAt, visit.timeZone), claimedBy)}</p> : null}
        {parts.length > 0 ? (
          <div>
            <h3>{strings.parts}</h3>
            <ul className={classes['parts']}>
              {parts.map((part) => <li key={part}>{part}</li>)}
            </ul>
          </div>
        ) : null}
        <h3>{strings.photos}</h3>
        {photos.length === 0 ? (
          <p className="quiet">{strings.noPhotos}</p>
        ) : (
          <PhotoGrid jobId={visit.linkId} photos={photos} subject={name} timeZone={visit.timeZone} urlOf={guestPhotoUrl} />
        )}
        <AddPhotos milestoneId={milestone.id} onSent={onPhoto} />
        {answeredAt ? <p role="status"><strong>{strings.answered}</strong></p> : <Asked {...{ milestone, who, onAnswer }} today={visit.today} />}
      </div>
    </Section>
  );
}

function Asked({ milestone, today, who, onAnswer }: Pick<MilestoneToSeeProps, 'milestone' | 'who' | 'onAnswer'> & { today: string }) {
  if (milestone.state === 'upcoming') return <p className="quiet">{strings.nothingYet}</p>;
  if (milestone.state === 'proven') return <p className="quiet">{strings.provenAlready}</p>;
  return <InspectForm key={milestone.version} milestone={milestone} today={today} who={who} onDone={onAnswer} />;
}
