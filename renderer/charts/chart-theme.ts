/** Colours of the pictures, read from the design tokens, so that light and dark follow the page. */
export interface ChartTheme {
  readonly ink: string;
  readonly quiet: string;
  readonly rule: string;
  readonly trace: string;
  readonly sheet: string;
  readonly pBranch: string;
  readonly rBranch: string;
  readonly neutral: string;
  readonly accent: string;
  readonly bad: string;
  readonly font: string;
}

/** Reads the tokens that hold at `element`. */
export function readChartTheme(element: Element): ChartTheme {
  const style = getComputedStyle(element);
  const token = (name: string): string => style.getPropertyValue(name).trim();
  return {
    ink: token('--ink'),
    quiet: token('--ink-quiet'),
    rule: token('--grid-line'),
    trace: token('--trace'),
    sheet: token('--sheet'),
    pBranch: token('--p-branch'),
    rBranch: token('--r-branch'),
    neutral: token('--q-branch'),
    accent: token('--accent'),
    bad: token('--bad'),
    font: style.fontFamily,
  };
}
