import { useEffect } from 'react';
import type { ConsoleFrame } from '../../shared-model/contract/frame.ts';
import type { Remedy, WayBack } from '../../shared-model/retraction/verdict.ts';
import { useConsole } from '../store/console-store.ts';
import { FoldSuspected } from './fold-suspected.tsx';
import { choosePreview, usePreview } from './remedy-preview.ts';
import { StandingLine } from './standing-line.tsx';

const SHAPE = { clear: '●', 'would-buckle': '▲', 'by-tip-retractor': '●', 'cannot-judge': '?' } as const;
const WORDS = {
  clear: 'Clear',
  'would-buckle': 'Would buckle',
  'by-tip-retractor': 'By tip retractor',
  'cannot-judge': 'Cannot judge',
} as const;

/** The verdict on the way back in one sentence with numbers, and what would help, as choices. */
export const VerdictPanel = () => {
  const kind = useConsole(({ frame }) => frame?.wayBack.kind ?? 'cannot-judge');
  const text = useConsole(({ frame }) => frame?.wayBack.text ?? 'Waiting for the console.');
  const asks = kind === 'would-buckle' || kind === 'cannot-judge';
  return (
    <section className="verdict" aria-label="Verdict on the way back">
      <p className="verdict-text">
        <strong className={asks ? 'verdict-asks' : ''}>
          <span aria-hidden="true">{SHAPE[kind]}</span> {WORDS[kind]}.
        </strong>{' '}
        {text}
      </p>
      <FoldSuspected />
      <Missing />
      <Remedies />
      <LastLine />
    </section>
  );
};

/** What to do about what is missing, where nothing can be judged. */
const Missing = () => {
  const help = useConsole(({ frame }) => (frame?.foldSuspected == null ? missingOf(frame?.wayBack) : ''));
  return help === '' ? null : <p className="trace">{help}</p>;
};

/** As one string, so that the panel draws again only when the words change. */
const missingOf = (way: WayBack | undefined): string =>
  way?.kind === 'cannot-judge' ? [...new Set(way.reasons.map((reason) => reason.remedy))].join(' ') : '';

/** What would help, each with its effect; the chosen one shows its outlook beside the present one. */
const Remedies = () => {
  const offered = useConsole(({ frame }) => offeredIn(frame));
  const { chosen } = usePreview();
  const remedies = JSON.parse(offered) as Offered[];
  const gone = chosen !== null && !remedies.some((one) => one.kind === chosen);
  useEffect(() => {
    if (gone) choosePreview(null);
  }, [gone]);
  if (remedies.length === 0) return null;
  return (
    <fieldset className="remedies" aria-label="What would help">
      {remedies.map((one) => (
        <button
          key={one.kind}
          type="button"
          title={one.text}
          aria-pressed={one.kind === chosen}
          onClick={() => choosePreview(one.kind)}
        >
          <span className="remedy-label">{one.label}</span>
          <span className="remedy-effect">{one.effect}</span>
        </button>
      ))}
    </fieldset>
  );
};

/** The chosen remedy in a sentence; without one, how the body is loaded meanwhile. */
const LastLine = () => {
  const { chosen } = usePreview();
  const sentence = useConsole(({ frame }) => {
    const offered = frame?.wayBack.kind === 'would-buckle' ? frame.wayBack.remedies : [];
    return offered.find((one) => one.kind === chosen)?.text;
  });
  return sentence === undefined ? (
    <StandingLine />
  ) : (
    <p className="trace one-line" title={sentence}>
      {sentence}
    </p>
  );
};

type Offered = Pick<Remedy, 'kind' | 'text' | 'label' | 'effect'>;

/** As a string, so that a frame with the same offers draws nothing. */
const offeredIn = (frame: ConsoleFrame | null): string =>
  JSON.stringify(
    frame?.wayBack.kind === 'would-buckle'
      ? frame.wayBack.remedies.map(
          ({ kind, text, label, effect }): Offered => ({ kind, text, label, effect }),
        )
      : [],
  );
