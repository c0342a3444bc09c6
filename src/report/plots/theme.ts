/** Colours of a plot. Never the only sign of anything: markers and dashes differ as well. */
export interface PlotTheme {
  readonly background: string;
  readonly text: string;
  readonly faint: string;
  readonly grid: string;
  readonly frame: string;
  readonly data: string;
  readonly fit: string;
  readonly second: string;
  readonly warning: string;
}

/**
 * For paper and light windows. Blue, vermilion, bluish green and reddish purple are those of the palette for all kinds of
 * colour vision by Okabe and Ito, "Color Universal Design" (2008), the purple darkened for contrast on white.
 */
export const lightTheme: PlotTheme = {
  background: '#ffffff',
  text: '#1c2126',
  faint: '#5b646d',
  grid: '#e4e8eb',
  frame: '#79838c',
  data: '#0072b2',
  fit: '#d55e00',
  second: '#007a59',
  warning: '#a8497d',
};

/** For dark windows: the same hues, lightened. */
export const darkTheme: PlotTheme = {
  background: '#15191d',
  text: '#e6eaed',
  faint: '#9aa5ae',
  grid: '#2a3137',
  frame: '#66717a',
  data: '#56b4e9',
  fit: '#f28b45',
  second: '#3fc79b',
  warning: '#e39ac1',
};
