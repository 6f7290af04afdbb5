import type { Chart, Plugin } from 'chart.js';
import type { ChartLine, HandedInLine } from './chart-lines.ts';
import type { ChartTheme } from './chart-theme.ts';
import { traceGlyph } from './glyphs.ts';

/** What the marks show; changed in place by the owner of the chart, read at every drawing. */
export interface MarkState {
  lines: readonly ChartLine[];
  handedIn: readonly HandedInLine[];
  handedInLabel: string;
  selectedId: string | null;
  showResiduals: boolean;
  theme: ChartTheme;
}

export const markRowHeight = 26;
const glyphRadius = 3.6;

interface MarkRow {
  readonly isotopologue: string;
  readonly lines: readonly ChartLine[];
}

/** One row of marks per isotopologue, in the order of first appearance. */
export function markRows(lines: readonly ChartLine[]): readonly MarkRow[] {
  const rows = new Map<string, ChartLine[]>();
  for (const line of lines) {
    const row = rows.get(line.isotopologue);
    if (row === undefined) rows.set(line.isotopologue, [line]);
    else row.push(line);
  }
  return [...rows].map(([isotopologue, members]) => ({ isotopologue, lines: members }));
}

/** Height that the rows of marks need above the plot, pixels. */
export function markHeight(state: Pick<MarkState, 'lines' | 'handedIn'>): number {
  const rows = markRows(state.lines).length + (state.handedIn.length > 0 ? 1 : 0);
  return rows === 0 ? 8 : rows * markRowHeight + 6;
}

/** Id of the line whose mark lies nearest to a place on the canvas (at most 9 pixels off), else null. */
export function lineAt(chart: Chart, state: MarkState, x: number, y: number): string | null {
  const rows = markRows(state.lines);
  const rowTop = chart.chartArea.top - markHeight(state);
  const row = y < chart.chartArea.top ? rows[Math.floor((y - rowTop - 2) / markRowHeight)] : undefined;
  let best: string | null = null;
  let bestDistance = 9;
  for (const line of row?.lines ?? state.lines) {
    const distance = Math.abs(chart.scales['x']!.getPixelForValue(line.wavenumberPerCm) - x);
    if (distance < bestDistance) {
      best = line.id;
      bestDistance = distance;
    }
  }
  return best;
}

/** Draws rows of marks above the plot, leaders to the trace, the residuals and the selected line, all in one pass. */
export function lineMarksPlugin(state: MarkState): Plugin {
  return {
    id: 'lineMarks',
    afterDatasetsDraw(chart) {
      const { ctx, chartArea } = chart;
      ctx.save();
      const rowTop = chartArea.top - markHeight(state);
      markRows(state.lines).forEach((row, index) => {
        drawRow(chart, state, row, rowTop + 2 + index * markRowHeight);
      });
      if (state.handedIn.length > 0) {
        drawHandedIn(chart, state, chartArea.top - markRowHeight - 2);
      }
      if (state.showResiduals) drawResiduals(chart, state);
      drawSelected(chart, state);
      ctx.restore();
    },
  };
}

function branchColour(theme: ChartTheme, branch: 'P' | 'R'): string {
  return branch === 'P' ? theme.pBranch : theme.rBranch;
}

function rowName(chart: Chart, theme: ChartTheme, text: string, y: number): void {
  const { ctx } = chart;
  ctx.fillStyle = theme.quiet;
  ctx.font = `11px ${theme.font}`;
  ctx.textAlign = 'right';
  ctx.textBaseline = 'middle';
  ctx.fillText(text, chart.chartArea.left - 8, y);
}

function drawRow(chart: Chart, state: MarkState, row: MarkRow, top: number): void {
  const { ctx, chartArea } = chart;
  const scale = chart.scales['x']!;
  const y = top + 18;
  rowName(chart, state.theme, row.isotopologue, y);
  ctx.textAlign = 'center';
  ctx.textBaseline = 'alphabetic';
  for (const branch of ['P', 'R'] as const) {
    const colour = branchColour(state.theme, branch);
    const members = row.lines
      .filter((line) => line.branch === branch)
      .map((line) => ({ line, x: scale.getPixelForValue(line.wavenumberPerCm) }))
      .filter(({ x }) => x >= chartArea.left && x <= chartArea.right)
      .sort((a, b) => a.x - b.x);
    if (members.length === 0) continue;
    ctx.strokeStyle = colour;
    ctx.globalAlpha = 0.55;
    ctx.lineWidth = 1;
    ctx.beginPath();
    ctx.moveTo(members[0]!.x, y);
    ctx.lineTo(members.at(-1)!.x, y);
    ctx.stroke();
    ctx.globalAlpha = 1;
    let lastLabel = -Infinity;
    for (const { line, x } of members) {
      drawLeader(chart, colour, line, x, y);
      drawMark(ctx, state.theme, line, x, y, line.id === state.selectedId);
      if (x - lastLabel > 17) {
        ctx.fillStyle = colour;
        ctx.font = `10px ${state.theme.font}`;
        ctx.fillText(lastLabel === -Infinity ? `${branch}(${line.jLower})` : String(line.jLower), x, y - 7);
        lastLabel = lastLabel === -Infinity ? x + 6 : x;
      }
    }
  }
}

function drawMark(
  ctx: CanvasRenderingContext2D,
  theme: ChartTheme,
  line: ChartLine,
  x: number,
  y: number,
  selected: boolean,
): void {
  const colour = branchColour(theme, line.branch);
  traceGlyph(ctx, line.glyph, x, y, selected ? glyphRadius + 2 : glyphRadius);
  ctx.lineWidth = selected ? 2 : 1.4;
  ctx.strokeStyle = colour;
  ctx.fillStyle = line.used ? colour : theme.sheet;
  ctx.fill();
  ctx.stroke();
}

function drawLeader(chart: Chart, colour: string, line: ChartLine, x: number, y: number): void {
  const { ctx } = chart;
  ctx.strokeStyle = colour;
  ctx.globalAlpha = 0.28;
  ctx.lineWidth = 1;
  ctx.setLineDash(line.used ? [] : [2, 3]);
  ctx.beginPath();
  ctx.moveTo(x, y + 5);
  ctx.lineTo(x, chart.scales['y']!.bottom);
  ctx.stroke();
  ctx.setLineDash([]);
  ctx.globalAlpha = 1;
}

function drawHandedIn(chart: Chart, state: MarkState, top: number): void {
  const { ctx, chartArea } = chart;
  const scale = chart.scales['x']!;
  const y = top + 18;
  rowName(chart, state.theme, state.handedInLabel, y);
  ctx.textAlign = 'center';
  ctx.textBaseline = 'alphabetic';
  let lastLabel = -Infinity;
  const drawn = state.handedIn
    .map((line) => ({ line, x: scale.getPixelForValue(line.wavenumberPerCm) }))
    .sort((a, b) => a.x - b.x);
  for (const { line, x } of drawn) {
    if (x < chartArea.left || x > chartArea.right) continue;
    ctx.strokeStyle = branchColour(state.theme, line.branch);
    ctx.lineWidth = line.agrees ? 1.2 : 2.4;
    ctx.beginPath();
    ctx.moveTo(x, y - 5);
    ctx.lineTo(x, y + 6);
    ctx.stroke();
    if (x - lastLabel > 26) {
      ctx.fillStyle = line.agrees ? state.theme.quiet : state.theme.bad;
      ctx.font = `${line.agrees ? '' : 'bold '}10px ${state.theme.font}`;
      ctx.fillText(line.label, x, y - 8);
      lastLabel = x;
    }
  }
}

function drawResiduals(chart: Chart, state: MarkState): void {
  const { ctx, chartArea } = chart;
  const x = chart.scales['x']!;
  const y = chart.scales['residual'];
  if (y === undefined) return;
  ctx.save();
  ctx.beginPath();
  ctx.rect(chartArea.left, y.top - 4, chartArea.right - chartArea.left, y.bottom - y.top + 8);
  ctx.clip();
  const zero = y.getPixelForValue(0);
  ctx.strokeStyle = state.theme.quiet;
  ctx.lineWidth = 1;
  ctx.beginPath();
  ctx.moveTo(chartArea.left, zero);
  ctx.lineTo(chartArea.right, zero);
  ctx.stroke();
  for (const line of state.lines) {
    if (line.residualPerCm === null) continue;
    const px = x.getPixelForValue(line.wavenumberPerCm);
    if (px < chartArea.left || px > chartArea.right) continue;
    const py = Math.min(y.bottom, Math.max(y.top, y.getPixelForValue(line.residualPerCm)));
    if (line.uncertaintyPerCm !== null && line.used) {
      ctx.strokeStyle = branchColour(state.theme, line.branch);
      ctx.lineWidth = 1;
      ctx.beginPath();
      ctx.moveTo(px, y.getPixelForValue(line.residualPerCm - line.uncertaintyPerCm));
      ctx.lineTo(px, y.getPixelForValue(line.residualPerCm + line.uncertaintyPerCm));
      ctx.stroke();
    }
    drawMark(ctx, state.theme, line, px, py, line.id === state.selectedId);
  }
  ctx.restore();
}

function drawSelected(chart: Chart, state: MarkState): void {
  const line = state.lines.find((candidate) => candidate.id === state.selectedId);
  if (line === undefined) return;
  const { ctx, chartArea } = chart;
  const x = chart.scales['x']!.getPixelForValue(line.wavenumberPerCm);
  if (x < chartArea.left || x > chartArea.right) return;
  ctx.strokeStyle = state.theme.accent;
  ctx.lineWidth = 1.5;
  ctx.beginPath();
  ctx.moveTo(x, chartArea.top);
  ctx.lineTo(x, chartArea.bottom);
  ctx.stroke();
  const text = `${line.branch}(${line.jLower})  ${line.wavenumberPerCm.toFixed(3)} cm\u207b\u00b9`;
  ctx.font = `bold 12px ${state.theme.font}`;
  const width = ctx.measureText(text).width + 12;
  const left = x + width + 8 > chartArea.right ? x - width - 6 : x + 6;
  ctx.fillStyle = state.theme.sheet;
  ctx.fillRect(left, chartArea.top + 4, width, 19);
  ctx.strokeStyle = state.theme.accent;
  ctx.lineWidth = 1;
  ctx.strokeRect(left, chartArea.top + 4, width, 19);
  ctx.fillStyle = state.theme.ink;
  ctx.textAlign = 'left';
  ctx.textBaseline = 'middle';
  ctx.fillText(text, left + 6, chartArea.top + 14);
}
