/** A point that Chart.js draws; objects are reused from frame to frame. */
export interface DrawnPoint {
  x: number;
  y: number;
}

/** First index whose x is not below `value` (x ascending); x.length where there is none. */
export function firstIndexFrom(x: Float64Array, value: number): number {
  let low = 0;
  let high = x.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (x[middle]! < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Indices [from, to) of the points inside a range, with one neighbour on each side so that the trace reaches the edges. */
export function indicesInView(x: Float64Array, from: number, to: number): readonly [number, number] {
  return [Math.max(0, firstIndexFrom(x, from) - 1), Math.min(x.length, firstIndexFrom(x, to) + 1)];
}

/** Lowest and highest y among the points of a range; null where no point lies in it. */
export function extremesInView(
  x: Float64Array,
  y: Float64Array,
  from: number,
  to: number,
): readonly [number, number] | null {
  const [first, last] = indicesInView(x, from, to);
  let low = Infinity;
  let high = -Infinity;
  for (let i = first; i < last; i++) {
    const value = y[i]!;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return low <= high ? [low, high] : null;
}

/**
 * Lowest and highest point of every pixel column, at their own x, so that no peak is lost and none is moved.
 * Fills `target` (reusing its objects) and sets its length. Where the view holds fewer points than two per column, all are kept.
 */
export function columnExtremes(
  x: Float64Array,
  y: Float64Array,
  view: { readonly from: number; readonly to: number },
  columns: number,
  target: DrawnPoint[],
): void {
  const [first, last] = indicesInView(x, view.from, view.to);
  let count = 0;
  const put = (index: number): void => {
    const point = target[count];
    if (point === undefined) target.push({ x: x[index]!, y: y[index]! });
    else {
      point.x = x[index]!;
      point.y = y[index]!;
    }
    count += 1;
  };
  if (last - first <= 2 * columns || columns < 1) {
    for (let i = first; i < last; i++) put(i);
  } else {
    const width = (view.to - view.from) / columns;
    let i = first;
    while (i < last) {
      const edge = view.from + (Math.floor((x[i]! - view.from) / width) + 1) * width;
      let lowest = i;
      let highest = i;
      let next = i + 1;
      while (next < last && x[next]! < edge) {
        if (y[next]! < y[lowest]!) lowest = next;
        if (y[next]! > y[highest]!) highest = next;
        next += 1;
      }
      put(Math.min(lowest, highest));
      if (lowest !== highest) put(Math.max(lowest, highest));
      i = next;
    }
  }
  target.length = count;
}
