import { Outlet } from 'react-router-dom';
import { RouteChange } from './route-change.tsx';

/** The frame of pages without the header strip, and of the moment before the first page is there. */
export function Bare() {
  return (
    <>
      <RouteChange />
      <Outlet />
    </>
  );
}
