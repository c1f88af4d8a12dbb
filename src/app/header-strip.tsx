import { Link, NavLink } from 'react-router-dom';
import { paths } from '../lib/paths.ts';
import { useMay, useMe } from '../lib/session.ts';
import { Button } from '../ui/button.tsx';
import { QuadrilleMark } from '../ui/marks.tsx';
import { Menu, MenuLink, MenuRule } from '../ui/menu.tsx';
import { GoTo } from './go-to.tsx';
import { PersonActs, useSignOut } from './person-menu.tsx';

interface Place {
  readonly to: string;
  readonly label: string;
  readonly count?: number;
}

function usePlaces(): readonly Place[] {
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

export function HeaderStrip() {
  const places = usePlaces();
  const { person } = useMe();
  const signingOut = useSignOut();
  return (
    <header className="strip">
      <Link className="mark" to={paths.recipes()}>
        <QuadrilleMark />
        Quadrille
      </Link>
      <nav className="strip-nav" aria-label="Main">
        {places.map((place) => (
          <NavLink key={place.to} to={place.to}>
            <PlaceLabel place={place} />
          </NavLink>
        ))}
      </nav>
      <div className="strip-who">
        <span className="wide-only">
          <GoTo />
        </span>
        <span className="wide-only">
          <Menu
            trigger={
              <button type="button" className="min-h-9 text-ink-2 underline decoration-transparent hover:text-ink">
                {person?.name}
              </button>
            }
          >
            <PersonActs onSignOut={signingOut.begin} />
          </Menu>
        </span>
        <span className="narrow-only">
          <Menu trigger={<Button small>Menu</Button>}>
            {places.map((place) => (
              <MenuLink key={place.to}>
                <NavLink to={place.to}>
                  <PlaceLabel place={place} />
                </NavLink>
              </MenuLink>
            ))}
            <MenuRule />
            <PersonActs onSignOut={signingOut.begin} />
          </Menu>
        </span>
      </div>
      {signingOut.question}
    </header>
  );
}

function PlaceLabel({ place }: { place: Place }) {
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
