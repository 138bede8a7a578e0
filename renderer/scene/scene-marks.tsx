import { invalidate } from '@react-three/fiber';
import { useEffect, useMemo } from 'react';
import { BufferAttribute, BufferGeometry, Line, LineBasicMaterial } from 'three';
import { ghosts } from '../../shared-model/mission/selectors.ts';
import { useConsole } from '../store/console-store.ts';
import type { SceneColours } from './scene-colours.ts';
import { toScene } from './to-scene.ts';

/** Branch points as diamonds, waypoints as pyramids, explored ways as lines. */
export const SceneMarks = ({ colours }: { readonly colours: SceneColours }) => {
  const mission = useConsole((state) => state.mission);
  const explored = useMemo(() => ghosts(mission), [mission]);
  useEffect(() => invalidate());
  return (
    <>
      {mission.branchPoints.map((point) => (
        <mesh key={point.id} position={lifted(point.tip.position, 0.3)}>
          <octahedronGeometry args={[0.14]} />
          <meshLambertMaterial color={colours.mark} />
        </mesh>
      ))}
      {mission.waypoints.map((waypoint) => (
        <mesh key={waypoint.id} position={lifted(waypoint.tip.position, 0.24)}>
          <coneGeometry args={[0.1, 0.2, 4]} />
          <meshLambertMaterial color={colours.mark} />
        </mesh>
      ))}
      {explored.map((branch) => (
        <Ghost
          key={branch.id}
          line={branch.line.flatMap((point) => [...point.position])}
          colour={colours.ghost}
        />
      ))}
    </>
  );
};

const lifted = (position: readonly number[], by: number): [number, number, number] => {
  const [x, y, z] = toScene(position) as [number, number, number];
  return [x, y + by, z];
};

const Ghost = ({ line, colour }: { readonly line: readonly number[]; readonly colour: string }) => {
  const object = useMemo(() => {
    const geometry = new BufferGeometry();
    geometry.setAttribute('position', new BufferAttribute(new Float32Array(toScene(line)), 3));
    return new Line(geometry, new LineBasicMaterial({ color: colour }));
  }, [line, colour]);
  useEffect(
    () => () => {
      object.geometry.dispose();
      object.material.dispose();
    },
    [object],
  );
  return <primitive object={object} />;
};
