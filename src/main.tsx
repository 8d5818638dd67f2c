import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import './fonts.css';
import '@fontsource/ibm-plex-mono/latin-400.css';
import '@fontsource/ibm-plex-mono/latin-500.css';
import '@fontsource/ibm-plex-mono/latin-600.css';
import './index.css';
import { App } from './app/app.tsx';
import { makeRouter } from './app/router.tsx';
import { signInAddress } from './app/safe-return.ts';
import { makeQueryClient } from './lib/query-client.ts';
import { isSigningOut } from './lib/session.ts';
import { followTheme } from './lib/theme.ts';

followTheme();

/** A full load: nothing read in the session that ended stays in memory. */
const queryClient = makeQueryClient(() => {
  if (isSigningOut()) return;
  const { pathname, search } = window.location;
  if (pathname !== '/sign-in') window.location.assign(signInAddress(`${pathname}${search}`));
});
const router = makeRouter(queryClient);

const root = document.getElementById('root');
if (!root) throw new Error('Expected an element #root in index.html');
createRoot(root).render(
  <StrictMode>
    <App queryClient={queryClient} router={router} />
  </StrictMode>,
);
