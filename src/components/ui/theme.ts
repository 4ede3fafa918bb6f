export type Theme = 'station' | 'light';
const KEY = 'halfpail.theme';

export function readTheme(storage: Storage = localStorage): Theme {
  return storage.getItem(KEY) === 'light' ? 'light' : 'station';
}

/** Dark for the ink room by default, light where the lamp glares; kept on this device. */
export function chooseTheme(theme: Theme, storage: Storage = localStorage): void {
  storage.setItem(KEY, theme);
  applyTheme();
}

export function applyTheme(): void {
  document.documentElement.dataset.theme = readTheme();
}
