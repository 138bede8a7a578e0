import { useMemo, useState } from 'react';
import type { Branch, MissionState, Waypoint } from '../../shared-model/mission/mission.ts';
import { openArms, targetsOnBody } from '../../shared-model/mission/selectors.ts';
import { dateAndTime, fixed, metres } from '../parts/format.ts';
import { HoldButton } from '../parts/hold-button.tsx';
import { useConsole } from '../store/console-store.ts';
import { ELEVATION, PLAN, PlanDrawing } from './plan-drawing.tsx';
import { stillUrl } from './still-url.ts';

/** Where the body has been: branches, waypoints, drawings, and the way back to each mark. */
export const PathTab = () => (
  <div className="path-page">
    <div className="path-left">
      <section className="panel">
        <h2>Branches</h2>
        <BranchTree />
        <OpenArms />
      </section>
      <section className="panel scroll">
        <h2>Waypoints</h2>
        <Waypoints />
      </section>
    </div>
    <div className="drawings">
      <section className="panel drawing">
        <h3>Plan: ahead to the right, the base's right downwards. Dashed: explored. Metres.</h3>
        <PlanDrawing projection={PLAN} words="Plan of the body and the explored ways" />
      </section>
      <section className="panel drawing">
        <h3>Elevation: ahead to the right, gravity downwards.</h3>
        <PlanDrawing projection={ELEVATION} words="Elevation of the body and the explored ways" />
      </section>
    </div>
  </div>
);

const BranchTree = () => {
  const mission = useConsole((state) => state.mission);
  const roots = mission.branches.filter((branch) => branch.parent === null);
  return (
    <ul className="tree">
      {roots.map((branch) => (
        <BranchNode key={branch.id} branch={branch} mission={mission} />
      ))}
    </ul>
  );
};

const BranchNode = ({ branch, mission }: { readonly branch: Branch; readonly mission: MissionState }) => {
  const here = branch.id === mission.currentBranch;
  const points = mission.branchPoints.filter((point) => point.branch === branch.id);
  const children = mission.branches.filter((one) => one.parent === branch.id);
  return (
    <li>
      <strong>{nameOf(branch, mission)}</strong> {metres(branch.from)} to {metres(branch.reached)}{' '}
      {here ? '● the tip is here' : '○ explored'}
      {points.length + children.length === 0 ? null : (
        <ul>
          {points.map((point) => (
            <li key={point.id}>
              ◇ {point.label} at {metres(point.length)}:{' '}
              {point.arms.map((arm) => `${arm.name} ${arm.state}`).join(', ')}{' '}
              <BacktrackTo id={point.id} label={point.label} />
            </li>
          ))}
          {children.map((child) => (
            <BranchNode key={child.id} branch={child} mission={mission} />
          ))}
        </ul>
      )}
    </li>
  );
};

const nameOf = (branch: Branch, mission: MissionState): string => {
  if (branch.arm !== null) {
    const point = mission.branchPoints.find((one) => one.id === branch.arm?.branchPoint);
    return `${point?.label ?? 'Branch'}, ${branch.arm.name} arm`;
  }
  return branch.parent === null ? 'From the base' : 'Way without a mark';
};

const OpenArms = () => {
  const mission = useConsole((state) => state.mission);
  const open = useMemo(() => openArms(mission), [mission]);
  if (open.length === 0) return null;
  return <p>Still open: {open.map(({ point, arm }) => `${point.label}, ${arm} arm`).join('; ')}.</p>;
};

/** Held like every motion; shown only for marks that lie on the body behind the tip. */
const BacktrackTo = ({ id, label }: { readonly id: string; readonly label: string }) => {
  const mission = useConsole((state) => state.mission);
  const length = useConsole(({ frame }) => Math.round((frame?.estimate?.length ?? 0) * 20) / 20);
  const reachable = useMemo(
    () => targetsOnBody(mission, length).some((target) => target.id === id && target.length < length + 0.05),
    [mission, length, id],
  );
  const state = useConsole(({ frame }) =>
    frame?.backtrack?.target !== id
      ? ''
      : frame.backtrack.arrived
        ? ': arrived'
        : `: ${metres(frame.backtrack.remaining)} to go`,
  );
  const blocked = useConsole(
    ({ frame }) => frame?.wayBack.kind === 'would-buckle' || frame?.wayBack.kind === 'cannot-judge',
  );
  if (!reachable) return null;
  return (
    <HoldButton
      control={`backtrack-${id}`}
      part={{ motion: { kind: 'backtrack', target: id } }}
      label={`Backtrack to ${label}`}
    >
      {blocked ? '▲ ' : ''}Hold to backtrack here{state}
    </HoldButton>
  );
};

const Waypoints = () => {
  const waypoints = useConsole((state) => state.mission.waypoints);
  if (waypoints.length === 0)
    return <p>None yet. Log waypoint, on Drive, keeps the picture, the place and the readings.</p>;
  return [...waypoints].reverse().map((waypoint) => <WaypointRow key={waypoint.id} waypoint={waypoint} />);
};

const WaypointRow = ({ waypoint }: { readonly waypoint: Waypoint }) => {
  const [large, setLarge] = useState(false);
  const [x, y, z] = waypoint.tip.position;
  const picture = waypoint.picture === null ? null : stillUrl(waypoint.picture);
  return (
    <article className="waypoint" style={large ? { gridTemplateColumns: '1fr' } : undefined}>
      {picture === null ? (
        <p className="trace">no picture</p>
      ) : (
        <button
          type="button"
          style={{ padding: 0, border: 0, background: 'none' }}
          aria-label={`Picture of waypoint ${waypoint.number}`}
          onClick={() => setLarge(!large)}
        >
          <img
            src={picture}
            alt={`Seen at waypoint ${waypoint.number}`}
            style={large ? { width: '100%', height: 'auto' } : undefined}
          />
        </button>
      )}
      <div>
        <strong>
          {waypoint.number}. {waypoint.note === '' ? 'No note' : waypoint.note}
        </strong>
        <p className="trace">
          at {metres(waypoint.length)}; {fixed(x, 2)} m right, {fixed(-y, 2)} m up, {fixed(z, 2)} m ahead of
          the base (estimated)
        </p>
        <p className="trace">{dateAndTime(waypoint.time)}</p>
        <BacktrackTo id={waypoint.id} label={`waypoint ${waypoint.number}`} />
      </div>
    </article>
  );
};
