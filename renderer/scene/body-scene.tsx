import { Canvas, invalidate, useThree } from '@react-three/fiber';
import { useEffect, useMemo, useState } from 'react';
import { PerspectiveCamera, Vector3 } from 'three';
import { OrbitControls } from 'three/addons/controls/OrbitControls.js';
import { fixed } from '../parts/format.ts';
import { consoleStore, useConsole } from '../store/console-store.ts';
import { SceneBody } from './scene-body.tsx';
import { useSceneColours } from './scene-colours.ts';
import { SceneMarks } from './scene-marks.tsx';
import { boundsOf, toScene } from './to-scene.ts';

const VIEWS = ['Orbit', 'Plan', 'Elevation', 'From the tip'] as const;
type View = (typeof VIEWS)[number];

const NO_WEBGL = 'This computer draws no 3D (WebGL is off). The Path tab shows plan and elevation.';

/** The body in 3D; drawn only when something changed, without a GPU if need be. */
export const BodyScene = () => {
  const [view, setView] = useState<View>('Orbit');
  const colours = useSceneColours();
  const grid = useConsole(({ body }) => gridSize(body?.points ?? []));
  return (
    <section className="panel scene" aria-label="Body in 3D">
      <Canvas
        frameloop="demand"
        dpr={1}
        gl={{ antialias: false, powerPreference: 'low-power' }}
        camera={{ fov: 40, near: 0.02, far: 400 }}
        aria-label="3D view of the body"
        fallback={NO_WEBGL}
      >
        <color attach="background" args={[colours.background]} />
        <ambientLight intensity={1.6} />
        <directionalLight position={[3, 8, 4]} intensity={1.8} />
        <gridHelper
          key={`${grid} ${colours.line}`}
          args={[grid, grid, colours.line, colours.line]}
          position={[0, -0.09, -grid / 2 + 1]}
        />
        <SceneBody colours={colours} />
        <SceneMarks colours={colours} />
        <ViewCamera view={view} />
      </Canvas>
      <div className="scene-views">
        {VIEWS.map((one) => (
          <button key={one} type="button" aria-pressed={view === one} onClick={() => setView(one)}>
            {one}
          </button>
        ))}
      </div>
      <p className="scene-note">Grid 1 m. Ahead: away from the base. Gravity down.</p>
      <p className="visually-hidden">
        <TipWords />
      </p>
    </section>
  );
};

const TipWords = () => {
  const words = useConsole(({ frame }) => {
    const tip = frame?.estimate?.tip.position;
    return tip === undefined
      ? 'Tip position unknown.'
      : `Tip ${fixed(tip[0], 1)} m right, ${fixed(-tip[1], 1)} m up, ${fixed(tip[2], 1)} m ahead of the base.`;
  });
  return words;
};

const gridSize = (points: readonly number[]): number =>
  Math.min(80, 4 * Math.ceil((boundsOf(points).size + 2) / 4));

/** Places the camera for a view and follows the body as it grows; orbiting is left to the hand. */
const ViewCamera = ({ view }: { readonly view: View }) => {
  const camera = useThree((state) => state.camera);
  const canvas = useThree((state) => state.gl.domElement);
  const size = useConsole(({ body }) => Math.ceil(boundsOf(body?.points ?? []).size));
  const fromTip = useConsole(({ frame }) =>
    view === 'From the tip' ? tipKey(frame?.estimate?.tip.position) : '',
  );
  const controls = useMemo(() => {
    const made = new OrbitControls(camera, canvas);
    made.enableDamping = false;
    made.addEventListener('change', () => invalidate());
    return made;
  }, [camera, canvas]);
  useEffect(() => () => controls.dispose(), [controls]);
  // biome-ignore lint/correctness/useExhaustiveDependencies: size and fromTip say when the body has outgrown the view
  useEffect(() => {
    if (camera instanceof PerspectiveCamera) place(camera, controls, view);
    invalidate();
  }, [camera, controls, view, size, fromTip]);
  return null;
};

const tipKey = (tip: readonly number[] | undefined): string =>
  tip?.map((value) => value.toFixed(2)).join() ?? '';

const place = (camera: PerspectiveCamera, controls: OrbitControls, view: View): void => {
  const { body, frame } = consoleStore.getState();
  const points = toScene(body?.points ?? []);
  const { centre, size } = boundsOf(points);
  const target = new Vector3(...centre);
  const distance = (0.62 * size) / Math.tan((camera.fov * Math.PI) / 360) / Math.min(1, camera.aspect) + 0.5;
  camera.up.set(0, 1, 0);
  if (view === 'Plan') {
    camera.up.set(0, 0, -1);
    camera.position.copy(target).add(new Vector3(0, distance, 0));
  } else if (view === 'Elevation') camera.position.copy(target).add(new Vector3(distance, 0.05, 0));
  else if (view === 'From the tip') {
    const n = points.length;
    const tip = n >= 3 ? new Vector3(points[n - 3], points[n - 2], points[n - 1]) : target;
    const before =
      n >= 9
        ? new Vector3(points[n - 9], points[n - 8], points[n - 7])
        : tip.clone().add(new Vector3(0, 0, 1));
    const ahead = tip.clone().sub(before).normalize();
    camera.position
      .copy(tip)
      .addScaledVector(ahead, -1.2)
      .add(new Vector3(0, 0.4, 0));
    target.copy(tip).addScaledVector(ahead, frame === null ? 1 : 2);
  } else camera.position.copy(target).add(new Vector3(0.55, 0.6, 0.58).multiplyScalar(distance));
  controls.target.copy(target);
  controls.update();
};
