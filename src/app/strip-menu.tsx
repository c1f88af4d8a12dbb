import type { ReactElement } from 'react';
import { NavLink } from 'react-router-dom';
import { Menu, MenuLink, MenuRule } from '../ui/menu.tsx';
import { PersonActs, useSignOut } from './person-menu.tsx';
import { PlaceLabel } from './place-label.tsx';
import type { Place } from './places.ts';

export interface StripMenuProps {
  readonly trigger: ReactElement;
  /** The navigation, where the strip has no room for it. */
  readonly places: readonly Place[];
}

/** The menu behind the person's name and, on a phone, behind "Menu". Loaded when it is first wanted. */
export function StripMenu({ trigger, places }: StripMenuProps) {
  const signingOut = useSignOut();
  return (
    <>
      <Menu trigger={trigger} startsOpen>
        {places.map((place) => (
          <MenuLink key={place.to}>
            <NavLink to={place.to}>
              <PlaceLabel place={place} />
            </NavLink>
          </MenuLink>
        ))}
        {places.length > 0 && <MenuRule />}
        <PersonActs onSignOut={signingOut.begin} />
      </Menu>
      {signingOut.question}
    </>
  );
}
