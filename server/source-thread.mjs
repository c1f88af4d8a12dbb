// Lets a thread of the pool run a script in TypeScript, while developing and in tests. tsx given as `--import` to a thread does not always
// take hold there (seen with tsx 4.23.15 on Node 20.20.2), so the thread asks for it itself.
import { workerData } from 'node:worker_threads';
import { register } from 'tsx/esm/api';

register();
const { default: act } = await import(workerData.script);

export default act;
