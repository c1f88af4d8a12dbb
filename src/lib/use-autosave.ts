import { useEffect, useState, useSyncExternalStore } from 'react';
import { type AutosaveState, type Standing, standingOf } from './autosave.ts';
import { type Autosave, type AutosaveSettings, createAutosave } from './autosave-driver.ts';

export interface UsedAutosave<P, B, C> extends Pick<Autosave<P, B, C>, 'change' | 'resolve' | 'settle'> {
  readonly state: AutosaveState<P, B, C>;
  readonly standing: Standing;
}

/** One autosave for the life of a component; give the component a `key` to start another. The settings of the first drawing hold. */
export function useAutosave<P, B, C>(settings: AutosaveSettings<P, B, C>): UsedAutosave<P, B, C> {
  const [saver] = useState(() => createAutosave(settings));
  const state = useSyncExternalStore(saver.subscribe, saver.state);
  useEffect(() => saver.attach(), [saver]);
  return { state, standing: standingOf(state), change: saver.change, resolve: saver.resolve, settle: saver.settle };
}
