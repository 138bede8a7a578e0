import { createStore, useStore } from 'zustand';
import type { OutlookLine } from '../../shared-model/contract/frame.ts';
import type { Remedy } from '../../shared-model/retraction/verdict.ts';
import { consoleApi } from '../connection/console-api.ts';

/** The remedy whose outlook is shown beside the present one. */
export interface Preview {
  readonly chosen: Remedy['kind'] | null;
  readonly line: OutlookLine | null;
}
export const previewStore = createStore<Preview>(() => ({ chosen: null, line: null }));
export const usePreview = (): Preview => useStore(previewStore);

/** A shape that changes makes other outlooks; once a second is soon enough for a person [ms]. */
const REFRESH = 1000;
let timer: ReturnType<typeof setInterval> | null = null;

/** Chooses the remedy to show; the same again or null shows none. */
export const choosePreview = (kind: Remedy['kind'] | null): void => {
  const chosen = previewStore.getState().chosen === kind ? null : kind;
  if (timer !== null) clearInterval(timer);
  timer = null;
  previewStore.setState({ chosen, line: null });
  if (chosen === null) return;
  void refresh();
  timer = setInterval(() => void refresh(), REFRESH);
};

const refresh = async (): Promise<void> => {
  const { chosen } = previewStore.getState();
  if (chosen === null) return;
  const answer = await consoleApi.request({ kind: 'preview-remedy', remedy: chosen });
  // Another may have been chosen while this one was on its way.
  if (previewStore.getState().chosen !== chosen) return;
  previewStore.setState({ line: answer.ok ? (answer.value as OutlookLine) : null });
};
