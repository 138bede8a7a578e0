import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { App } from './app.tsx';
import { consoleApi } from './connection/console-api.ts';
import { connectStore } from './store/console-store.ts';
import './theme.css';

connectStore(consoleApi);
createRoot(document.getElementById('root')!).render(
  <StrictMode>
    <App />
  </StrictMode>,
);
