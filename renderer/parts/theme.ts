import { useEffect, useState } from 'react';

type Theme = 'day' | 'night';
const KEY = 'foldback-theme';

/** The theme in use and how to switch it; kept on this computer, by default that of the system. */
export const useTheme = (): [Theme, () => void] => {
  const [theme, setTheme] = useState<Theme>(firstTheme);
  useEffect(() => {
    document.documentElement.dataset.theme = theme;
    localStorage.setItem(KEY, theme);
  }, [theme]);
  return [theme, () => setTheme((now) => (now === 'day' ? 'night' : 'day'))];
};

const firstTheme = (): Theme => {
  const kept = localStorage.getItem(KEY);
  if (kept === 'day' || kept === 'night') return kept;
  return window.matchMedia('(prefers-color-scheme: dark)').matches ? 'night' : 'day';
};
