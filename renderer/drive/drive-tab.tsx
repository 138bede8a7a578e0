import { lazy, Suspense } from 'react';
import { CameraPanel } from './camera-panel.tsx';
import { DriveControls } from './drive-controls.tsx';
import { OutlookChart } from './outlook-chart.tsx';
import { useDriveInputs } from './use-hand.ts';
import { VerdictPanel } from './verdict-panel.tsx';

const BodyScene = lazy(() =>
  import('../scene/body-scene.tsx').then(({ BodyScene }) => ({ default: BodyScene })),
);

export const DriveTab = () => {
  useDriveInputs();
  return (
    <div className="drive">
      <CameraPanel />
      <div className="side">
        <Suspense fallback={<div className="panel">Loading the 3D view…</div>}>
          <BodyScene />
        </Suspense>
        <div className="panel way">
          <OutlookChart />
          <VerdictPanel />
        </div>
      </div>
      <DriveControls />
    </div>
  );
};
