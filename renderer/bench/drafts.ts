import { createStore, useStore } from 'zustand';
import type { TrialKind } from '../../shared-model/trials/trial.ts';

/** One point of a trial by the names of its fields, in SI. */
export type Point = Readonly<Record<string, number>>;

/** Trials under way; kept while other tabs are shown, until they are saved. */
interface Drafts {
  readonly open: TrialKind | null;
  readonly points: Readonly<Partial<Record<TrialKind, readonly Point[]>>>;
  /** What stands in the fields of the next point, by trial and field. */
  readonly texts: Readonly<Partial<Record<TrialKind, Readonly<Record<string, string>>>>>;
}
const draftStore = createStore<Drafts>(() => ({ open: null, points: {}, texts: {} }));
const NO_POINTS: readonly Point[] = [];
const NO_TEXTS: Readonly<Record<string, string>> = {};

export const useOpenTrial = (): TrialKind | null => useStore(draftStore, (state) => state.open);
export const openTrial = (open: TrialKind | null): void => draftStore.setState({ open });

export const usePoints = (kind: TrialKind): readonly Point[] =>
  useStore(draftStore, (state) => state.points[kind] ?? NO_POINTS);
export const setPoints = (kind: TrialKind, points: readonly Point[]): void =>
  draftStore.setState((state) => ({ points: { ...state.points, [kind]: points } }));

export const useTexts = (kind: TrialKind): Readonly<Record<string, string>> =>
  useStore(draftStore, (state) => state.texts[kind] ?? NO_TEXTS);
export const setTexts = (kind: TrialKind, texts: Readonly<Record<string, string>>): void =>
  draftStore.setState((state) => ({ texts: { ...state.texts, [kind]: texts } }));
