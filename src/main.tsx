import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { App } from './app/app.tsx';
import { startMessages } from './lib/messages.ts';
import { applyTheme, readPreferences } from './lib/preferences.ts';
import './styles.css';

applyTheme(readPreferences().theme);
await startMessages();

const root = document.getElementById('root');
if (!root) throw new Error('index.html has no #root');
createRoot(root).render(
  <StrictMode>
    <App />
  </StrictMode>,
);
