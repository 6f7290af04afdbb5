/** Numbers that a JCAMP-DX file of the example states; x and y as they shall be read. */
export interface JcampContent {
  readonly title: string;
  readonly xPerCm: Float64Array;
  readonly y: Float64Array;
  readonly yUnits: string;
  readonly resolutionPerCm: number;
}
export type JcampForm = 'affn' | 'packed' | 'squeezed' | 'difdup' | 'xypoints';

const squeezed = { plus: '@ABCDEFGHI', minus: '@abcdefghi' };
const difference = { plus: '%JKLMNOPQR', minus: '%jklmnopqr' };
const duplicate = ' STUVWXYZs';
const lineWidth = 78;

/** A whole number with its first digit (and sign) replaced by the letter of the table. */
function lettered(value: number, table: { readonly plus: string; readonly minus: string }): string {
  const digits = String(Math.abs(value));
  const letters = value < 0 ? table.minus : table.plus;
  return letters[Number(digits[0])]! + digits.slice(1);
}

function plain(form: 'affn' | 'packed' | 'squeezed', value: number): string {
  if (form === 'squeezed') return lettered(value, squeezed);
  if (form === 'packed') return value < 0 ? String(value) : `+${value}`;
  return ` ${value}`;
}

/** Lines of X++(Y..Y) in fixed, packed or squeezed form. */
function orderedLines(
  form: 'affn' | 'packed' | 'squeezed',
  xText: (i: number) => string,
  y: readonly number[],
): string[] {
  const lines: string[] = [];
  let line = '';
  y.forEach((value, i) => {
    const text = plain(form, value);
    if (line !== '' && line.length + text.length > lineWidth) {
      lines.push(line);
      line = '';
    }
    line = line === '' ? xText(i) + text : line + text;
  });
  if (line !== '') lines.push(line);
  return lines;
}

/** "J1J1J1" becomes "J1" and a count: a difference that repeats n times is written once, followed by n as a letter. */
function withDuplicates(text: string, count: number): string {
  if (count === 1) return text;
  const digits = String(count);
  return text + duplicate[Number(digits[0])]! + digits.slice(1);
}

/**
 * Lines of X++(Y..Y) in difference form with duplicate suppression: each line starts with the abscissa and the value of
 * the last point of the line before (the Y-check), and the last line holds nothing but that check.
 */
function differenceLines(xText: (i: number) => string, y: readonly number[]): string[] {
  const lines: string[] = [];
  let line = xText(0) + lettered(y[0]!, squeezed);
  let i = 1;
  while (i < y.length) {
    const step = y[i]! - y[i - 1]!;
    let count = 1;
    while (i + count < y.length && y[i + count]! - y[i + count - 1]! === step) count++;
    const text = withDuplicates(lettered(step, difference), count);
    if (line.length + text.length > lineWidth) {
      lines.push(line);
      line = xText(i - 1) + lettered(y[i - 1]!, squeezed);
    }
    line += text;
    i += count;
  }
  lines.push(line, xText(y.length - 1) + lettered(y.at(-1)!, squeezed));
  return lines;
}

/** A factor of two or five times a power of ten: exact in decimal, and fine enough for `largest` in `steps` steps. */
function niceFactor(largest: number, steps: number): number {
  const exponent = Math.floor(Math.log10(largest / steps));
  const power = 10 ** exponent;
  const factor = [1, 2, 5, 10].find((each) => each * power * steps >= largest) ?? 10;
  return Number((factor * power).toPrecision(1));
}

function fixed(value: number, digits: number): string {
  return String(Number(value.toFixed(digits)));
}

/** A JCAMP-DX 4.24 text (McDonald and Wilks, Appl. Spectrosc. 42 (1988) 151) with LF line ends. */
export function jcampText(content: JcampContent, form: JcampForm): string {
  const { xPerCm: x, y } = content;
  const count = x.length;
  if (count < 2 || y.length !== count) {
    throw new RangeError(
      `xPerCm and y must have the same length of at least 2, got ${count} and ${y.length}`,
    );
  }
  const yFactor = niceFactor(Math.max(...[...y].map(Math.abs), 1e-6), 1e6);
  const whole = Array.from(y, (value) => {
    const integer = Math.round(value / yFactor);
    return Object.is(integer, -0) ? 0 : integer;
  });
  const firstX = Number(x[0]!.toFixed(6));
  const lastX = Number(x[count - 1]!.toFixed(6));
  const deltaX = (lastX - firstX) / (count - 1);
  const xAt = (i: number): number => firstX + i * deltaX;
  const asY = (integer: number): string => String(Number((integer * yFactor).toPrecision(12)));
  const head = [
    `##TITLE= ${content.title}`,
    '##JCAMP-DX= 4.24',
    '##DATA TYPE= INFRARED SPECTRUM',
    '##ORIGIN= invented data, simulated',
    '##OWNER= public domain',
    '##STATE= gas',
    '##XUNITS= 1/CM',
    `##YUNITS= ${content.yUnits}`,
    `##RESOLUTION= ${content.resolutionPerCm}`,
    `##FIRSTX= ${firstX}`,
    `##LASTX= ${lastX}`,
    `##DELTAX= ${deltaX.toPrecision(12)}`,
    `##MAXX= ${Math.max(firstX, lastX)}`,
    `##MINX= ${Math.min(firstX, lastX)}`,
    `##MAXY= ${asY(whole.reduce((a, b) => Math.max(a, b)))}`,
    `##MINY= ${asY(whole.reduce((a, b) => Math.min(a, b)))}`,
    '##XFACTOR= 1',
    `##YFACTOR= ${form === 'xypoints' ? 1 : yFactor}`,
    `##NPOINTS= ${count}`,
    `##FIRSTY= ${asY(whole[0]!)}`,
  ];
  if (form === 'xypoints') {
    const pairs = whole.map((integer, i) => `${fixed(xAt(i), 5)}, ${asY(integer)}`);
    return [...head, '##XYPOINTS= (XY..XY)', ...pairs, '##END=', ''].join('\n');
  }
  const xText = (i: number): string => fixed(xAt(i), 4);
  const lines = form === 'difdup' ? differenceLines(xText, whole) : orderedLines(form, xText, whole);
  return [...head, '##XYDATA= (X++(Y..Y))', ...lines, '##END=', ''].join('\n');
}
