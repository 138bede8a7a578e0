import { lazy, Suspense, useMemo, useState } from 'react';
import type { BenchReading } from '../../shared-model/contract/request.ts';
import { fitTrial } from '../../shared-model/trials/fit-trial.ts';
import type { TrialFit, TrialKind } from '../../shared-model/trials/trial.ts';
import { consoleApi } from '../connection/console-api.ts';
import { fixed } from '../parts/format.ts';
import { HoldButton } from '../parts/hold-button.tsx';
import { report } from '../parts/notice.ts';
import { useConsole } from '../store/console-store.ts';
import { type Point, setPoints, setTexts, usePoints, useTexts } from './drafts.ts';
import { numberOf, type TrialField, type TrialGuide, trialOf } from './trial-guide.ts';
import { ValueTable } from './value-table.tsx';

const TrialPlot = lazy(() => import('./trial-plot.tsx').then(({ TrialPlot }) => ({ default: TrialPlot })));

/** One trial, step by step: readings from the rig, what the person measured, the fit as it grows, and its record. */
export const TrialPanel = ({
  guide,
  onSaved,
}: {
  readonly guide: TrialGuide;
  readonly onSaved: () => void;
}) => {
  const machine = useConsole(({ rig }) => rig?.machine ?? null);
  const points = usePoints(guide.kind);
  const fit = useMemo(
    () => (machine === null ? null : fitTrial(trialOf(guide.kind, points), machine)),
    [machine, points, guide.kind],
  );
  return (
    <section className="panel trial" aria-label={guide.title}>
      <h2>{guide.title}</h2>
      <p className="cautions">{guide.caution}</p>
      <ol className="trial-steps">
        {guide.steps.map((step) => (
          <li key={step}>{step}</li>
        ))}
      </ol>
      <PointForm guide={guide} onAdd={(point) => setPoints(guide.kind, [...points, point])} />
      <div className="trial-work">
        <PointTable
          fields={guide.fields}
          points={points}
          onRemove={(at) =>
            setPoints(
              guide.kind,
              points.filter((_, i) => i !== at),
            )
          }
        />
        {fit === null || points.length === 0 ? null : <Fit fit={fit} />}
      </div>
      <SaveForm
        kind={guide.kind}
        points={points}
        ready={fit?.ok === true}
        onSaved={() => {
          setPoints(guide.kind, []);
          onSaved();
        }}
      />
    </section>
  );
};

/** The fields of the next point; the rig fills in what it can read. */
const PointForm = ({
  guide,
  onAdd,
}: {
  readonly guide: TrialGuide;
  readonly onAdd: (point: Point) => void;
}) => {
  const texts = useTexts(guide.kind);
  const fill = (next: Readonly<Record<string, string>>): void => setTexts(guide.kind, next);
  const take = async (): Promise<void> => {
    const answer = await consoleApi.request({ kind: 'bench-take', trial: guide.kind });
    const reading = answer.ok ? (answer.value as BenchReading) : null;
    report(answer, `Read: mean of ${reading?.count ?? 0} readings.`);
    if (reading === null) return;
    const read = guide.fields.flatMap((field) => {
      const value = field.read?.(reading);
      return value == null ? [] : [[field.name, (value / field.factor).toFixed(field.places)] as const];
    });
    fill({ ...texts, ...Object.fromEntries(read) });
  };
  const add = (): void => {
    const entries = guide.fields.map((field) => [field, numberOf(texts[field.name] ?? '')] as const);
    const missing = entries.filter(([, value]) => value === null).map(([field]) => field.label.toLowerCase());
    if (missing.length > 0) {
      report(
        { ok: false, code: 'missing', text: `Still a number is wanted for: ${missing.join(', ')}.` },
        '',
      );
      return;
    }
    onAdd(
      Object.fromEntries(entries.map(([field, value]) => [field.name, (value as number) * field.factor])),
    );
    fill({});
  };
  return (
    <div className="trial-form">
      {guide.pulls ? (
        <HoldButton control="bench-retract" part={{ motion: { kind: 'retract' } }} label="Retract slowly">
          Retract slowly
        </HoldButton>
      ) : null}
      <button type="button" onClick={() => void take()}>
        Take reading
      </button>
      {guide.fields.map((field) => (
        <label key={field.name}>
          {field.label}, {field.unit}
          <input
            inputMode="decimal"
            value={texts[field.name] ?? ''}
            onChange={(event) => fill({ ...texts, [field.name]: event.target.value })}
          />
        </label>
      ))}
      <button type="button" onClick={add}>
        Add point
      </button>
    </div>
  );
};

const PointTable = (props: {
  readonly fields: readonly TrialField[];
  readonly points: readonly Point[];
  readonly onRemove: (at: number) => void;
}) =>
  props.points.length === 0 ? (
    <p className="trace">No points yet.</p>
  ) : (
    <table>
      <thead>
        <tr>
          <th className="number">No.</th>
          {props.fields.map((field) => (
            <th key={field.name} className="number">
              {field.label}, {field.unit}
            </th>
          ))}
          <th>
            <span className="visually-hidden">Remove</span>
          </th>
        </tr>
      </thead>
      <tbody>
        {props.points.map((point, i) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: points have no other name, and are only added at the end
          <tr key={i}>
            <td className="number">{i + 1}</td>
            {props.fields.map((field) => (
              <td key={field.name} className="number">
                {fixed(point[field.name]! / field.factor, field.places)}
              </td>
            ))}
            <td>
              <button type="button" aria-label={`Remove point ${i + 1}`} onClick={() => props.onRemove(i)}>
                Remove
              </button>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );

const Fit = ({ fit }: { readonly fit: TrialFit }) =>
  fit.ok ? (
    <div className="trial-fit">
      <ValueTable values={fit.values} />
      <Suspense fallback={<p className="trace">Drawing…</p>}>
        <TrialPlot plot={fit.plot} />
      </Suspense>
    </div>
  ) : (
    <p role="status">▲ {fit.why}</p>
  );

/** Days that a trial holds if nobody says otherwise (common practice). */
const HOLDS_DAYS = 180;

const SaveForm = (props: {
  readonly kind: TrialKind;
  readonly points: readonly Point[];
  readonly ready: boolean;
  readonly onSaved: () => void;
}) => {
  const [initials, setInitials] = useState('');
  const [days, setDays] = useState(String(HOLDS_DAYS));
  const [saving, setSaving] = useState(false);
  const save = async (): Promise<void> => {
    const holds = numberOf(days);
    if (holds === null || !(holds >= 1 && holds <= 3650)) {
      report({ ok: false, code: 'days', text: 'It may hold from 1 to 3650 days.' }, '');
      return;
    }
    // A second press meanwhile would keep the same trial twice, for ever.
    setSaving(true);
    try {
      const answer = await consoleApi.request({
        kind: 'bench-save',
        trial: trialOf(props.kind, props.points),
        initials: initials.trim(),
        expires: new Date(Date.now() + holds * 86_400_000).toISOString(),
      });
      report(answer, 'Trial saved. It is in force from the next start of the console.');
      if (answer.ok) props.onSaved();
    } finally {
      setSaving(false);
    }
  };
  return (
    <div className="trial-form">
      <label>
        Your initials
        <input value={initials} maxLength={12} onChange={(event) => setInitials(event.target.value)} />
      </label>
      <label>
        Holds for, days
        <input inputMode="numeric" value={days} onChange={(event) => setDays(event.target.value)} />
      </label>
      <button
        type="button"
        disabled={saving || !props.ready || initials.trim() === ''}
        onClick={() => void save()}
        title={props.ready ? 'Needs your initials' : 'Needs enough points for a fit'}
      >
        Save trial
      </button>
    </div>
  );
};
