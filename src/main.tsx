import { setNonce } from 'get-nonce';
import { createRoot } from 'react-dom/client';
import { App } from './app/app.tsx';
import { openPreferences } from './lib/preferences.ts';
import './ui/style.css';

// Dialogs add a style element of their own; the policy takes it by this nonce.
const nonce = document.querySelector('meta[name="csp-nonce"]')?.getAttribute('content');
if (nonce) setNonce(nonce);
// Without this every first schema of zod tries `new Function`, which the policy reports. Set here, before any page's chunk brings
// schemas, and by the place where zod's copies share their settings: its own `config` would add 4 kB to every page.
Object.assign(globalThis, { __zod_globalConfig: { jitless: true } });
openPreferences(null);

const root = document.getElementById('root');
if (root === null) throw new Error('index.html has no element with the id "root"');
createRoot(root).render(<App />);
