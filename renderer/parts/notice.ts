import { createStore, useStore } from 'zustand';
import type { Answer } from '../../shared-model/contract/request.ts';

/** The last answer to a request that a person should see; it stays until the next. */
interface Notice {
  readonly text: string;
  readonly kind: 'done' | 'refused';
}
const noticeStore = createStore<{ readonly notice: Notice | null }>(() => ({ notice: null }));

export const useNotice = (): Notice | null => useStore(noticeStore, (state) => state.notice);
export const clearNotice = (): void => noticeStore.setState({ notice: null });

/** Says what became of a request; `done` is what to say when it was carried out. */
export const report = (answer: Answer, done: string): void =>
  noticeStore.setState({
    notice: answer.ok ? { text: done, kind: 'done' } : { text: answer.text, kind: 'refused' },
  });
