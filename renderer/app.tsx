import { Tabs } from 'radix-ui';
import { lazy, Suspense, useState } from 'react';
import { AlarmLine } from './alarms/alarm-line.tsx';
import { DriveTab } from './drive/drive-tab.tsx';
import { hand, useHandSafety } from './drive/use-hand.ts';
import { Shortcuts } from './parts/shortcuts.tsx';
import { TakeOver } from './parts/take-over.tsx';
import { useTheme } from './parts/theme.ts';
import { useConsole } from './store/console-store.ts';
import { Strip } from './strip/strip.tsx';

const PathTab = lazy(() => import('./path/path-tab.tsx').then(({ PathTab }) => ({ default: PathTab })));
const ReviewTab = lazy(() =>
  import('./review/review-tab.tsx').then(({ ReviewTab }) => ({ default: ReviewTab })),
);
const BenchTab = lazy(() => import('./bench/bench-tab.tsx').then(({ BenchTab }) => ({ default: BenchTab })));
const RigTab = lazy(() => import('./rig/rig-tab.tsx').then(({ RigTab }) => ({ default: RigTab })));

const TABS = [
  { name: 'Drive', Panel: DriveTab },
  { name: 'Path', Panel: PathTab },
  { name: 'Review', Panel: ReviewTab },
  { name: 'Bench', Panel: BenchTab },
  { name: 'Rig', Panel: RigTab },
] as const;

export const App = () => {
  useHandSafety();
  const [tab, setTab] = useState<string>('Drive');
  const [theme, switchTheme] = useTheme();
  const simulated = useConsole(({ rig }) => rig?.simulated);
  const rigName = useConsole(({ rig }) => rig?.name ?? 'no rig yet');
  const change = (next: string): void => {
    hand.letGo();
    setTab(next);
  };
  return (
    <Tabs.Root className="app" value={tab} onValueChange={change} activationMode="manual">
      <div className="top">
        <Tabs.List className="tab-list" aria-label="Tabs">
          {TABS.map(({ name }) => (
            <Tabs.Trigger key={name} value={name}>
              {name}
            </Tabs.Trigger>
          ))}
        </Tabs.List>
        <span className="spring" />
        <TakeOver />
        <span className={simulated === true ? 'banner' : ''}>
          {simulated === true ? 'Simulated rig' : rigName}
        </span>
        <button type="button" onClick={switchTheme}>
          {theme === 'day' ? 'Night colours' : 'Day colours'}
        </button>
        <Shortcuts />
      </div>
      <Strip />
      {TABS.map(({ name, Panel }) => (
        <Tabs.Content key={name} value={name} className="tab-panel">
          <Suspense fallback={<p className="page">Loading…</p>}>
            <Panel />
          </Suspense>
        </Tabs.Content>
      ))}
      <AlarmLine />
    </Tabs.Root>
  );
};
