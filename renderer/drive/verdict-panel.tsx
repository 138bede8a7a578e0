import { useConsole } from '../store/console-store.ts';

const SHAPE = { clear: '●', 'would-buckle': '▲', 'by-tip-retractor': '●', 'cannot-judge': '?' } as const;
const WORDS = {
  clear: 'Clear',
  'would-buckle': 'Would buckle',
  'by-tip-retractor': 'By tip retractor',
  'cannot-judge': 'Cannot judge',
} as const;

/** The verdict on the way back in one sentence with numbers, and what would help. */
export const VerdictPanel = () => {
  const kind = useConsole(({ frame }) => frame?.wayBack.kind ?? 'cannot-judge');
  const text = useConsole(({ frame }) => frame?.wayBack.text ?? 'Waiting for the console.');
  const help = useConsole(({ frame }) => helpOf(frame?.wayBack));
  const asks = kind === 'would-buckle' || kind === 'cannot-judge';
  return (
    <section className="verdict" aria-label="Verdict on the way back">
      <p>
        <strong className={asks ? 'verdict-word verdict-asks' : 'verdict-word'}>
          <span aria-hidden="true">{SHAPE[kind]}</span> {WORDS[kind]}.
        </strong>{' '}
        {text}
      </p>
      {help === '' ? null : (
        <ul className="remedies">
          {help.split('\n').map((line) => (
            <li key={line}>{line}</li>
          ))}
        </ul>
      )}
    </section>
  );
};

/** As one string, so that the panel draws again only when the words change. */
const helpOf = (way: import('../../shared-model/retraction/verdict.ts').WayBack | undefined): string => {
  if (way?.kind === 'would-buckle') return way.remedies.map((remedy) => remedy.text).join('\n');
  if (way?.kind === 'cannot-judge')
    return [...new Set(way.reasons.map((reason) => reason.remedy))].join('\n');
  return '';
};
