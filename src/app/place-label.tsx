import type { Place } from './places.ts';

export function PlaceLabel({ place }: { place: Place }) {
  if (place.count === undefined || place.count === 0) return place.label;
  return (
    <>
      {place.label}
      <span className="lab">
        {place.count}
        <span className="sr-only"> waiting</span>
      </span>
    </>
  );
}
