/** For which background a still picture is inked. `either` reads on white and on near black. */
export type StaticTheme = 'light' | 'dark' | 'either';

/** Colours of everything in a still picture that a trace does not colour itself. */
export interface Ink {
  readonly text: string;
  readonly axis: string;
  readonly grid: string;
}

/** The inks. `either` has a contrast of about 4.5 to 1 against white and against black alike. */
export const INKS: Readonly<Record<StaticTheme, Ink>> = {
  light: { text: '#22272e', axis: '#6b727b', grid: '#80808030' },
  dark: { text: '#e3e6ea', axis: '#9aa1aa', grid: '#8a8a8a40' },
  either: { text: '#767676', axis: '#808080', grid: '#80808030' },
};
