import { lazy, Suspense, useState } from 'react';
import { Link, NavLink } from 'react-router-dom';
import { paths } from '../lib/paths.ts';
import { useMe } from '../lib/session.ts';
import { buttonClass } from '../ui/button.tsx';
import { QuadrilleMark } from '../ui/marks.tsx';
import { GoTo } from './go-to.tsx';
import { PlaceLabel } from './place-label.tsx';
import { type Place, usePlaces } from './places.ts';

const loadMenu = () => import('./strip-menu.tsx');
const StripMenu = lazy(async () => ({ default: (await loadMenu()).StripMenu }));

export function HeaderStrip() {
  const places = usePlaces();
  const { person } = useMe();
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
          <MenuOnDemand label={person?.name ?? ''} className="min-h-9 text-ink-2 hover:text-ink" places={[]} />
        </span>
        <span className="narrow-only">
          <MenuOnDemand label="Menu" className={buttonClass('plain', true)} places={places} />
        </span>
      </div>
    </header>
  );
}

interface MenuOnDemandProps {
  readonly label: string;
  readonly className: string;
  readonly places: readonly Place[];
}

/** A plain button until it is pressed; only then is the menu loaded, so that no page waits for it. */
function MenuOnDemand({ label, className, places }: MenuOnDemandProps) {
  const [isWanted, setWanted] = useState(false);
  const plain = (
    <button
      type="button"
      className={className}
      aria-haspopup="menu"
      aria-expanded={false}
      onPointerEnter={() => void loadMenu()}
      onClick={() => setWanted(true)}
    >
      {label}
    </button>
  );
  if (!isWanted) return plain;
  const trigger = (
    <button type="button" className={className}>
      {label}
    </button>
  );
  return (
    <Suspense fallback={plain}>
      <StripMenu trigger={trigger} places={places} />
    </Suspense>
  );
}
