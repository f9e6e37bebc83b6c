import type { Change } from '@tallypole/shared/schemas/changes';
import { writtenDate } from '../../../lib/dates.ts';
import { reviewKinds } from '../strings.ts';

const nameOf = (kind: Change['reviews'][number]['kind']) => reviewKinds.find(({ value }) => value === kind)?.label ?? kind;

/** Who reviewed a structural change, when, and the file itself. */
export function ReviewList({ jobId, reviews }: { jobId: string; reviews: Change['reviews'] }) {
  if (reviews.length === 0) return <p className="quiet">Not reviewed yet: it can&apos;t be sent out before.</p>;
  return (
    <ul style={{ margin: 0, paddingLeft: 18 }}>
      {reviews.map((review) => (
        <li key={review.id}>
          {nameOf(review.kind)}, {review.reviewerName}
          {review.license ? ` (${review.license})` : ''}, {writtenDate(review.reviewedOn)}: <a href={`/api/jobs/${jobId}/files/${review.fileId}`}>{review.fileName}</a>
          {review.current ? null : <strong> · what is built was altered after it</strong>}
          {review.note ? <span className="quiet"> · {review.note}</span> : null}
        </li>
      ))}
    </ul>
  );
}
