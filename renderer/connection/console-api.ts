import type { ConsoleApi } from '../../shared-model/contract/api.ts';
import { createBrowserApi } from './browser-api.ts';

declare global {
  interface Window {
    /** Given by Electron's preload. */
    readonly foldback?: ConsoleApi;
  }
}

/** The console of whichever shell this page runs in. */
export const consoleApi: ConsoleApi = window.foldback ?? createBrowserApi(window);
