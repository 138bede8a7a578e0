import { useEffect, useRef, useState } from 'react';
import type { ConsoleFrame, Passage } from '../../shared-model/contract/frame.ts';
import type { Pose } from '../../shared-model/shape/vector.ts';
import { fixed } from '../parts/format.ts';
import { consoleStore, useConsole } from '../store/console-store.ts';
import { culvertFacets } from './culvert.ts';
import { paintCulvert } from './paint-culvert.ts';
import { offerStills } from './still-picture.ts';

/** The picture from the tip, the largest thing on Drive; it never passes an old frame as live. */
export const CameraPanel = () => {
  const camera = useConsole(({ rig }) => rig?.camera ?? null);
  return (
    <section className="camera" aria-label="Camera at the tip">
      {camera?.kind === 'drawn' ? <DrawnCamera passages={camera.passages} /> : null}
      {camera?.kind === 'video' ? <VideoCamera wanted={camera.label} /> : null}
      {camera === null || camera.kind === 'none' ? (
        <p className="camera-trouble">
          {camera === null ? 'Waiting for the console.' : 'The rig file names no camera.'}
        </p>
      ) : null}
    </section>
  );
};

/** Frames are drawn at most this often [ms]. */
const DRAW_EVERY = 100;
/** Older than this a picture is not live [s]. */
const LIVE = 0.5;

const DrawnCamera = ({ passages }: { readonly passages: readonly Passage[] }) => {
  const canvas = useRef<HTMLCanvasElement>(null);
  useEffect(() => {
    // Painted by the processor: where there is no GPU, an emulated one would hold up the controls.
    const ctx = canvas.current?.getContext('2d', { willReadFrequently: true });
    if (!ctx) return;
    const facets = culvertFacets(passages);
    let drawn = '';
    const draw = (): void => {
      const { frame } = consoleStore.getState();
      const pose = frame === null ? null : cameraPose(frame);
      const roll = frame?.estimate?.roll ?? 0;
      const key = JSON.stringify([pose, roll.toFixed(3)]);
      if (pose === null || key === drawn) return;
      drawn = key;
      paintCulvert(ctx, facets, pose, roll);
      caption(ctx);
    };
    draw();
    const timer = setInterval(draw, DRAW_EVERY);
    const stop = offerStills(() => {
      if (pictureAge() > LIVE) return Promise.resolve(null);
      return new Promise((resolve) => ctx.canvas.toBlob(resolve, 'image/jpeg', 0.85));
    });
    return () => {
      clearInterval(timer);
      stop();
    };
  }, [passages]);
  return (
    <>
      <canvas ref={canvas} width={800} height={500} role="img" aria-label="Simulated picture from the tip" />
      <CameraFacts age={useAge(pictureAge)} source="drawn from the built-in rig" />
    </>
  );
};

/** Whoever finds the still later must see that no camera took it. */
const caption = (ctx: CanvasRenderingContext2D): void => {
  ctx.font = '16px sans-serif';
  ctx.fillStyle = 'rgba(255,255,255,0.85)';
  ctx.fillText('Simulated', 12, 24);
};

const cameraPose = ({ readings }: ConsoleFrame): Pose | null => {
  const value = (name: keyof typeof readings): number => {
    const reading = readings[name];
    return reading?.quality === 'good' ? Number(reading.value.toFixed(4)) : Number.NaN;
  };
  const position = [value('camera_x'), value('camera_y'), value('camera_z')] as const;
  const quaternion = [
    value('camera_qw'),
    value('camera_qx'),
    value('camera_qy'),
    value('camera_qz'),
  ] as const;
  return [...position, ...quaternion].every(Number.isFinite) ? { position, quaternion } : null;
};

const pictureAge = (): number => {
  const { frame, framedAt, connected } = consoleStore.getState();
  const reading = frame?.readings.camera_x;
  if (frame === null || !connected || reading?.quality !== 'good') return Number.POSITIVE_INFINITY;
  return frame.at - reading.at + performance.now() / 1000 - framedAt;
};

/** An age that is looked at four times a second. */
const useAge = (age: () => number): number => {
  const [now, setNow] = useState(Number.POSITIVE_INFINITY);
  useEffect(() => {
    const timer = setInterval(() => setNow(age()), 250);
    return () => clearInterval(timer);
  }, [age]);
  return now;
};

const CameraFacts = ({ age, source }: { readonly age: number; readonly source: string }) => {
  const roll = useConsole(({ frame }) => frame?.estimate?.roll ?? null);
  const live = age <= LIVE;
  return (
    <>
      {live ? null : (
        <p className="camera-trouble">
          {Number.isFinite(age) ? `Frozen: this picture is ${fixed(age, 1)} s old.` : 'No picture.'}
        </p>
      )}
      <div className="camera-facts">
        <span>{live ? '● live' : '○ not live'}</span>
        <span>age {Number.isFinite(age) ? `${fixed(age, 1)} s` : 'unknown'}</span>
        <span>
          {roll === null ? 'roll unknown' : `roll ${fixed((roll * 180) / Math.PI, 0)}°, set upright`}
        </span>
        <span>{source}</span>
      </div>
    </>
  );
};

const VideoCamera = ({ wanted }: { readonly wanted: string | null }) => {
  const video = useRef<HTMLVideoElement>(null);
  const shownAt = useRef(Number.NEGATIVE_INFINITY);
  const [trouble, setTrouble] = useState<string | null>(null);
  const [devices, setDevices] = useState<readonly MediaDeviceInfo[]>([]);
  const [chosen, setChosen] = useState(() => localStorage.getItem(CAMERA_KEY) ?? wanted ?? '');
  useEffect(() => {
    const element = video.current;
    if (element === null) return;
    let stream: MediaStream | null = null;
    let callback = 0;
    const seen = (): void => {
      shownAt.current = performance.now() / 1000;
      callback = element.requestVideoFrameCallback(seen);
    };
    openCamera(chosen).then(
      async (opened) => {
        stream = opened;
        element.srcObject = opened;
        callback = element.requestVideoFrameCallback(seen);
        setTrouble(null);
        setDevices(
          (await navigator.mediaDevices.enumerateDevices()).filter((device) => device.kind === 'videoinput'),
        );
      },
      (error: Error) =>
        setTrouble(`No camera: ${error.message}. Plug it in, allow the camera, or choose another.`),
    );
    const stop = offerStills(() => stillOf(element));
    return () => {
      stop();
      element.cancelVideoFrameCallback(callback);
      for (const track of stream?.getTracks() ?? []) track.stop();
    };
  }, [chosen]);
  const choose = (label: string): void => {
    localStorage.setItem(CAMERA_KEY, label);
    setChosen(label);
  };
  const [age] = useState(() => () => performance.now() / 1000 - shownAt.current);
  return (
    <>
      <video ref={video} autoPlay muted playsInline />
      <CameraFacts age={useAge(age)} source={chosen === '' ? 'first camera' : chosen} />
      {trouble === null ? null : <p className="camera-trouble">{trouble}</p>}
      {devices.length < 2 ? null : (
        <select
          aria-label="Camera"
          value={chosen}
          style={{ position: 'absolute', top: 6, right: 6 }}
          onChange={(event) => choose(event.target.value)}
        >
          {devices.map((device) => (
            <option key={device.deviceId} value={device.label}>
              {device.label}
            </option>
          ))}
        </select>
      )}
    </>
  );
};
const CAMERA_KEY = 'foldback-camera';

/** The device whose label holds `label`, or the first. */
const openCamera = async (label: string): Promise<MediaStream> => {
  const first = await navigator.mediaDevices.getUserMedia({ video: true, audio: false });
  const devices = await navigator.mediaDevices.enumerateDevices();
  const found = devices.find(
    (device) => device.kind === 'videoinput' && label !== '' && device.label.includes(label),
  );
  if (found === undefined || first.getVideoTracks()[0]?.getSettings().deviceId === found.deviceId)
    return first;
  for (const track of first.getTracks()) track.stop();
  return navigator.mediaDevices.getUserMedia({
    video: { deviceId: { exact: found.deviceId } },
    audio: false,
  });
};

const stillOf = (video: HTMLVideoElement): Promise<Blob | null> => {
  if (video.videoWidth === 0) return Promise.resolve(null);
  const canvas = document.createElement('canvas');
  canvas.width = video.videoWidth;
  canvas.height = video.videoHeight;
  canvas.getContext('2d')?.drawImage(video, 0, 0);
  return new Promise((resolve) => canvas.toBlob(resolve, 'image/jpeg', 0.9));
};
