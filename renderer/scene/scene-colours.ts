import { useEffect, useState } from 'react';

export interface SceneColours {
  readonly background: string;
  readonly line: string;
  readonly laid: string;
  readonly free: string;
  readonly ghost: string;
  readonly mark: string;
}

const DAY: SceneColours = {
  background: '#eceef0',
  line: '#b4bac0',
  laid: '#5d7f94',
  free: '#2f6f8f',
  ghost: '#9d948a',
  mark: '#6b3f8a',
};
const NIGHT: SceneColours = {
  background: '#121517',
  line: '#363d43',
  laid: '#7fa3b8',
  free: '#a6d3ea',
  ghost: '#6f675e',
  mark: '#c39ae0',
};

/** Colours of the 3D view in the present theme. */
export const useSceneColours = (): SceneColours => {
  const [colours, setColours] = useState(present);
  useEffect(() => {
    const watch = new MutationObserver(() => setColours(present()));
    watch.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] });
    return () => watch.disconnect();
  }, []);
  return colours;
};

const present = (): SceneColours => (document.documentElement.dataset.theme === 'night' ? NIGHT : DAY);
