import { invalidate } from '@react-three/fiber';
import { useEffect, useMemo } from 'react';
import { BufferAttribute, BufferGeometry, DynamicDrawUsage } from 'three';
import { consoleStore, useConsole } from '../store/console-store.ts';
import type { SceneColours } from './scene-colours.ts';
import { toScene } from './to-scene.ts';
import { createTube, layTube, type TubeBuffers } from './tube.ts';

/** The console thins the body to about this many points. */
const MOST_POINTS = 512;

/** Laid part, free end, muscles along it, and the tip with its camera direction and the uncertainty of the length. */
export const SceneBody = ({ colours }: { readonly colours: SceneColours }) => {
  const radius = useConsole(({ rig }) => rig?.bodyRadius ?? 0.05);
  const laid = useMemo(() => new LiveTube(MOST_POINTS), []);
  const free = useMemo(() => new LiveTube(MOST_POINTS), []);
  useEffect(() => {
    const lay = (): void => {
      const { body } = consoleStore.getState();
      if (body === null) return;
      const points = toScene(body.points);
      laid.lay(points.slice(0, 3 * body.laid), radius);
      free.lay(points.slice(3 * Math.max(0, body.laid - 1)), radius);
      invalidate();
    };
    lay();
    const unsubscribe = consoleStore.subscribe((state, before) => {
      if (state.body !== before.body) lay();
    });
    return () => {
      unsubscribe();
      laid.geometry.dispose();
      free.geometry.dispose();
    };
  }, [laid, free, radius]);
  return (
    <>
      <mesh geometry={laid.geometry} frustumCulled={false}>
        <meshLambertMaterial color={colours.laid} />
      </mesh>
      <mesh geometry={free.geometry} frustumCulled={false}>
        <meshLambertMaterial color={colours.free} />
      </mesh>
      <mesh position={[0, 0, 0.05]}>
        <boxGeometry args={[0.34, 0.3, 0.1]} />
        <meshLambertMaterial color={colours.line} />
      </mesh>
      <Muscles colours={colours} radius={radius} />
      <Tip colours={colours} radius={radius} />
    </>
  );
};

/** A tube whose buffers are written in place as the body grows. */
class LiveTube {
  readonly geometry = new BufferGeometry();
  readonly #tube: TubeBuffers;
  readonly #position: BufferAttribute;
  readonly #normal: BufferAttribute;

  constructor(points: number) {
    this.#tube = createTube(points);
    this.#position = new BufferAttribute(this.#tube.position, 3).setUsage(DynamicDrawUsage);
    this.#normal = new BufferAttribute(this.#tube.normal, 3).setUsage(DynamicDrawUsage);
    this.geometry.setAttribute('position', this.#position);
    this.geometry.setAttribute('normal', this.#normal);
    this.geometry.setIndex(new BufferAttribute(this.#tube.index, 1));
    this.geometry.setDrawRange(0, 0);
  }

  lay(line: readonly number[], radius: number): void {
    this.geometry.setDrawRange(0, layTube(this.#tube, line, radius));
    this.#position.needsUpdate = true;
    this.#normal.needsUpdate = true;
  }
}

/** One thin line a muscle along the free end, thicker the more it is pressurised. */
const Muscles = ({ colours, radius }: { readonly colours: SceneColours; readonly radius: number }) => {
  const angles = useConsole(({ rig }) => rig?.muscleAngles ?? NONE);
  const most = useConsole(({ rig }) => rig?.limits.musclePressureMax ?? 1);
  const activity = useConsole(({ frame }) =>
    angles
      .map((_, i) => {
        const reading = frame?.readings[`muscle_${i + 1}_pressure` as 'muscle_1_pressure'];
        return reading?.quality === 'good' ? Math.round((10 * Math.max(0, reading.value)) / most) : 0;
      })
      .join(' '),
  );
  const body = useConsole((state) => state.body);
  const shares = activity.split(' ').map((one) => Number(one) / 10);
  useEffect(() => invalidate());
  if (body === null) return null;
  const free = toScene(body.points).slice(3 * Math.max(0, body.laid - 1));
  return angles.map((angle, i) => {
    const offset: [number, number, number] = [
      radius * 1.1 * Math.cos(angle),
      -radius * 1.1 * Math.sin(angle),
      0,
    ];
    return (
      <MuscleLine
        key={angle}
        line={free}
        offset={offset}
        width={0.008 + 0.022 * (shares[i] ?? 0)}
        colour={colours.mark}
      />
    );
  });
};
const NONE: readonly number[] = [];

const MuscleLine = (props: {
  readonly line: readonly number[];
  readonly offset: readonly number[];
  readonly width: number;
  readonly colour: string;
}) => {
  const tube = useMemo(() => new LiveTube(128), []);
  useEffect(() => () => tube.geometry.dispose(), [tube]);
  useEffect(() => {
    tube.lay(
      props.line.map((value, i) => value + props.offset[i % 3]!),
      props.width,
    );
    invalidate();
  });
  return (
    <mesh geometry={tube.geometry} frustumCulled={false}>
      <meshLambertMaterial color={props.colour} />
    </mesh>
  );
};

const Tip = ({ colours, radius }: { readonly colours: SceneColours; readonly radius: number }) => {
  const at = useConsole(
    ({ frame }) => frame?.estimate?.tip.position.map((value) => value.toFixed(2)).join(' ') ?? '',
  );
  const attitude = useConsole(
    ({ frame }) => frame?.estimate?.tip.quaternion.map((value) => value.toFixed(2)).join(' ') ?? '',
  );
  const band = useConsole(({ frame }) => Math.round((frame?.estimate?.lengthBand ?? 0) * 50) / 50);
  useEffect(() => invalidate());
  if (at === '') return null;
  const [x, y, z] = toScene(at.split(' ').map(Number)) as [number, number, number];
  const [w, qx, qy, qz] = attitude.split(' ').map(Number) as [number, number, number, number];
  return (
    // Half a turn about x takes the base frame into the scene; the same turn takes the attitude along.
    <group position={[x, y, z]} quaternion={[qx, -qy, -qz, w]}>
      <mesh position={[0, 0, -0.22]} rotation={[Math.PI / 2, 0, 0]}>
        <coneGeometry args={[radius * 1.4, 0.3, 12, 1, true]} />
        <meshBasicMaterial color={colours.mark} wireframe />
      </mesh>
      <mesh rotation={[0, 0, 0]}>
        <torusGeometry args={[radius * 1.3 + band, 0.012, 6, 28]} />
        <meshBasicMaterial color={colours.free} />
      </mesh>
    </group>
  );
};
