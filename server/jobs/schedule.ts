import type { Frame } from '../http/frame.ts';
import { pruneDraftSaves } from '../services/draft-saves.ts';

const HOUR_MS = 3600 * 1000;

/** Starts what runs by the clock; gives the function that stops it. A job that fails is logged and tried again at its next time. */
export function startJobs(frame: Frame): () => void {
  const timer = setInterval(() => {
    pruneDraftSaves(frame.db, frame.clock()).then(
      (dropped) => frame.log.info({ dropped }, 'old draft saves dropped'),
      (error: unknown) => frame.log.error({ err: error }, 'dropping old draft saves failed'),
    );
  }, HOUR_MS);
  return () => clearInterval(timer);
}
