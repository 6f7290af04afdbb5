import { Chart, LineController, LineElement, LinearScale, PointElement } from 'chart.js';
import type { ChartConfiguration, ScaleOptionsByType, Plugin } from 'chart.js';
import zoomPlugin, { zoomScale } from 'chartjs-plugin-zoom';
import { residualBound, tickLabel } from './chart-lines.ts';
import type { ChartTheme } from './chart-theme.ts';
import { columnExtremes, extremesInView } from './column-extremes.ts';
import type { DrawnPoint } from './column-extremes.ts';
import { lineAt, lineMarksPlugin, markHeight } from './line-marks.ts';
import type { MarkState } from './line-marks.ts';

Chart.register(LineController, LineElement, LinearScale, PointElement, zoomPlugin);

export interface SpectrumData {
  /** Ascending. */
  readonly wavenumberPerCm: Float64Array;
  readonly ordinate: Float64Array;
  readonly ordinateLabel: string;
}

export interface View {
  readonly from: number;
  readonly to: number;
}

export interface SpectrumPlot {
  readonly view: () => View;
  readonly full: () => View;
  readonly setView: (view: View) => void;
  readonly setSpectrum: (data: SpectrumData, view: View | null) => void;
  readonly setMarks: (marks: Omit<MarkState, 'theme'>) => void;
  readonly setTheme: (theme: ChartTheme) => void;
  readonly canvas: HTMLCanvasElement;
  readonly destroy: () => void;
}

export interface SpectrumPlotOptions {
  readonly theme: ChartTheme;
  readonly ordinateLabel: string;
  readonly abscissaLabel: string;
  readonly residualLabel: string;
  readonly onPick: (lineId: string | null) => void;
  readonly onView: (view: View) => void;
}

const leftAxisWidth = 84;
const least = 0.5;

/** Makes the picture of a spectrum: trace by pixel-column extremes, x falling to the right, marks and residuals by one plugin. */
export function makeSpectrumPlot(
  canvas: HTMLCanvasElement,
  first: SpectrumData,
  options: SpectrumPlotOptions,
): SpectrumPlot {
  let data = first;
  const points: DrawnPoint[] = [];
  const marks: MarkState = {
    lines: [],
    handedIn: [],
    handedInLabel: '',
    selectedId: null,
    showResiduals: false,
    theme: options.theme,
  };
  const full = (): View => ({
    from: data.wavenumberPerCm[0] ?? 0,
    to: data.wavenumberPerCm.at(-1) ?? 1,
  });
  const seen = (chart: Chart): View => {
    const { min, max } = chart.scales['x']!;
    return { from: min, to: max };
  };
  const config = configuration(points, options, marks, {
    data: () => data,
    full,
    onView: (chart) => options.onView(seen(chart)),
  });
  const chart = new Chart(canvas, config);

  return {
    canvas,
    view: () => seen(chart),
    full,
    setView(view) {
      zoomScale(chart, 'x', { min: view.from, max: view.to }, 'none');
      options.onView(seen(chart));
    },
    setSpectrum(next, view) {
      data = next;
      const range = view ?? full();
      const scales = chart.options.scales!;
      scales['x']!.min = range.from;
      scales['x']!.max = range.to;
      setLimits(chart, full());
      setTitle(chart, next.ordinateLabel);
      chart.update('none');
    },
    setMarks(next) {
      Object.assign(marks, next);
      const bound = residualBound(marks.lines);
      const residual = chart.options.scales!['residual'] as unknown as {
        display: boolean;
        min: number;
        max: number;
        stackWeight: number;
      };
      residual.display = marks.showResiduals;
      residual.min = -bound;
      residual.max = bound;
      residual.stackWeight = marks.showResiduals ? 1 : 0.001;
      chart.update('none');
    },
    setTheme(theme) {
      marks.theme = theme;
      applyTheme(chart, theme);
      chart.update('none');
    },
    destroy: () => chart.destroy(),
  };
}

interface Sources {
  readonly data: () => SpectrumData;
  readonly full: () => View;
  readonly onView: (chart: Chart) => void;
}

/** Fills the drawn points before the elements are made, when the width of the plot is known. */
function extremesPlugin(points: DrawnPoint[], sources: Sources): Plugin<'line'> {
  return {
    id: 'columnExtremes',
    beforeElementsUpdate(chart) {
      const x = chart.scales['x']!;
      const { wavenumberPerCm, ordinate } = sources.data();
      columnExtremes(
        wavenumberPerCm,
        ordinate,
        { from: x.min, to: x.max },
        Math.ceil(x.width * (chart.currentDevicePixelRatio || 1)),
        points,
      );
    },
  };
}

function configuration(
  points: DrawnPoint[],
  options: SpectrumPlotOptions,
  marks: MarkState,
  sources: Sources,
): ChartConfiguration<'line', DrawnPoint[]> {
  const { theme } = options;
  const range = sources.full();
  return {
    type: 'line',
    data: {
      datasets: [
        {
          data: points,
          yAxisID: 'y',
          parsing: false,
          normalized: true,
          borderColor: theme.trace,
          borderWidth: 1,
          pointRadius: 0,
          pointHitRadius: 0,
          spanGaps: false,
          tension: 0,
        },
      ],
    },
    plugins: [extremesPlugin(points, sources), lineMarksPlugin(marks)],
    options: {
      animation: false,
      responsive: true,
      maintainAspectRatio: false,
      normalized: true,
      events: ['click', 'mousemove', 'mouseout'],
      hover: { mode: null } as never,
      layout: { padding: () => ({ top: markHeight(marks), right: 18, left: 0, bottom: 2 }) },
      onClick: (event, _elements, chart) => {
        if (event.x !== null && event.y !== null) options.onPick(lineAt(chart, marks, event.x, event.y));
      },
      plugins: {
        zoom: {
          limits: { x: { min: range.from, max: range.to, minRange: least } },
          pan: { enabled: true, mode: 'x', threshold: 4, onPan: ({ chart }) => sources.onView(chart) },
          zoom: {
            mode: 'x',
            wheel: { enabled: true, speed: 0.12 },
            pinch: { enabled: false },
            drag: {
              enabled: true,
              modifierKey: 'shift',
              backgroundColor: 'rgb(0 114 178 / 18%)',
              borderColor: theme.accent,
              borderWidth: 1,
            },
            onZoom: ({ chart }) => sources.onView(chart),
          },
        },
      },
      scales: {
        residual: residualScale(options),
        y: ordinateScale(options, sources),
        x: {
          type: 'linear',
          reverse: true,
          min: range.from,
          max: range.to,
          title: { display: true, text: options.abscissaLabel, color: theme.quiet },
          ticks: {
            color: theme.quiet,
            maxRotation: 0,
            autoSkipPadding: 24,
            callback: (value, _index, ticks) => tickLabel(Number(value), spacing(ticks)),
          },
          grid: { color: theme.rule },
          border: { color: theme.quiet },
        },
      },
    },
  };
}

type LinearOptions = Partial<ScaleOptionsByType<'linear'>>;

function residualScale(options: SpectrumPlotOptions): LinearOptions {
  const { theme } = options;
  return {
    type: 'linear',
    display: false,
    position: 'left',
    stack: 'left',
    stackWeight: 0.001,
    min: -0.01,
    max: 0.01,
    title: { display: true, text: options.residualLabel, color: theme.quiet },
    ticks: {
      color: theme.quiet,
      maxTicksLimit: 3,
      callback: (value: number | string) => signed(Number(value)),
    },
    grid: { color: theme.rule },
    border: { color: theme.quiet },
    afterFit: (scale: { width: number }) => {
      scale.width = leftAxisWidth;
    },
  } as unknown as LinearOptions;
}

function ordinateScale(options: SpectrumPlotOptions, sources: Sources): LinearOptions {
  const { theme } = options;
  return {
    type: 'linear',
    position: 'left',
    stack: 'left',
    stackWeight: 3,
    offset: false,
    title: { display: true, text: options.ordinateLabel, color: theme.quiet },
    ticks: { color: theme.quiet, maxTicksLimit: 6 },
    grid: { color: theme.rule },
    border: { color: theme.quiet },
    beforeDataLimits: undefined,
    // The range of y follows the view; x is known from its options, since it is laid out after y.
    afterDataLimits: (scale: { chart: Chart; min: number; max: number }) => {
      const x = scale.chart.options.scales!['x'] as { min: number; max: number };
      const { wavenumberPerCm, ordinate } = sources.data();
      const extremes = extremesInView(wavenumberPerCm, ordinate, x.min, x.max);
      if (extremes === null) return;
      const margin = Math.max(0.06 * (extremes[1] - extremes[0]), 1e-6);
      scale.min = extremes[0] - margin;
      scale.max = extremes[1] + margin;
    },
    afterFit: (scale: { width: number }) => {
      scale.width = leftAxisWidth;
    },
  } as unknown as LinearOptions;
}

function spacing(ticks: readonly { readonly value: number }[]): number {
  return ticks.length < 2 ? 1 : Math.abs(ticks[1]!.value - ticks[0]!.value);
}

function signed(value: number): string {
  if (value === 0) return '0';
  return `${value > 0 ? '+' : '\u2212'}${String(Math.abs(value))}`;
}

function setLimits(chart: Chart, range: View): void {
  chart.options.plugins!.zoom!.limits = { x: { min: range.from, max: range.to, minRange: least } };
}

function setTitle(chart: Chart, text: string): void {
  (chart.options.scales!['y'] as { title: { text: string } }).title.text = text;
}

function applyTheme(chart: Chart, theme: ChartTheme): void {
  chart.data.datasets[0]!.borderColor = theme.trace;
  for (const scale of Object.values(chart.options.scales ?? {}) as {
    title: { color: string };
    ticks: { color: string };
    grid: { color: string };
    border: { color: string };
  }[]) {
    scale.title.color = theme.quiet;
    scale.ticks.color = theme.quiet;
    scale.grid.color = theme.rule;
    scale.border.color = theme.quiet;
  }
}
