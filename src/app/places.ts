import { paths } from '../lib/paths.ts';
import { useMay, useMe } from '../lib/session.ts';

export interface Place {
  readonly to: string;
  readonly label: string;
  readonly count?: number;
}

/** What the navigation leads to, for this person. */
export function usePlaces(): readonly Place[] {
  const { reviewsWaiting } = useMe();
  const seesReviews = useMay('see reviews');
  const seesTeam = useMay('see the team');
  return [
    { to: paths.recipes(), label: 'Recipes' },
    { to: paths.designs(), label: 'My designs' },
    ...(seesReviews ? [{ to: paths.reviews(), label: 'Reviews', count: reviewsWaiting }] : []),
    ...(seesTeam ? [{ to: paths.team(), label: 'Team' }] : []),
  ];
}
