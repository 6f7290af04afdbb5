import type { PrescribedMethod } from '../types.ts';
import {
  combinationDifferencePrimitives,
  midpointPrimitives,
  successiveDifferencePrimitives,
} from './differences.ts';
import type { MethodLine, MethodOutcome, Primitives } from './method-line.ts';
import { applyWeights, polynomialPrimitives } from './polynomial.ts';

interface KnownWeights {
  readonly keys: Primitives['keys'];
  readonly weights: Primitives['weights'];
  readonly readingCovariance: Float64Array;
}

/**
 * Weights by method and by the m of the lines: they do not depend on the wavenumbers, and the same few hundred sets of m come back
 * for every submission. Emptied when full; results do not depend on it.
 */
const knownWeights = new Map<string, KnownWeights>();
const mostKnown = 6000;

/** What the prescribed method reads off these lines (cm-1), or why it cannot. */
export function primitivesByMethod(lines: readonly MethodLine[], method: PrescribedMethod): MethodOutcome {
  const id = idOf(lines, method);
  const known = knownWeights.get(id);
  if (known !== undefined) {
    const own = linesOfMethod(lines, method);
    const values = known.weights.map((w) => applyWeights(w, own));
    return { ok: true, primitives: { ...known, values } };
  }
  const outcome = freshPrimitives(lines, method);
  if (outcome.ok) {
    if (knownWeights.size >= mostKnown) knownWeights.clear();
    knownWeights.set(id, outcome.primitives);
  }
  return outcome;
}

function idOf(lines: readonly MethodLine[], method: PrescribedMethod): string {
  let id: string = method.fit;
  if (method.fit === 'polynomial') id += `${method.degree}${distortionOf(method)}`;
  else if (method.fit === 'combination-differences') id += `${method.intercept}${method.cubicTerm}`;
  else if (method.fit === 'single-branch') id += method.branch;
  for (const line of lines) id += ` ${line.m}`;
  return id;
}

function freshPrimitives(lines: readonly MethodLine[], method: PrescribedMethod): MethodOutcome {
  switch (method.fit) {
    case 'polynomial':
      return polynomialPrimitives(lines, method.degree, distortionOf(method));
    case 'combination-differences':
      return combinationDifferencePrimitives(lines, method);
    case 'successive-differences':
      return successiveDifferencePrimitives(lines);
    case 'single-branch':
      return polynomialPrimitives(linesOfMethod(lines, method), 2, 'tied');
    case 'midpoint':
      return midpointPrimitives(lines);
  }
}

/** Lines that a method looks at, in the order of the weights that `primitivesByMethod` returns. */
export function linesOfMethod(lines: readonly MethodLine[], method: PrescribedMethod): readonly MethodLine[] {
  if (method.fit !== 'single-branch') return lines;
  return lines.filter((line) => (method.branch === 'R' ? line.m > 0 : line.m < 0));
}

/** Name of a method in the words of the trade. */
export function methodName(method: PrescribedMethod): string {
  switch (method.fit) {
    case 'polynomial': {
      const name = ['linear', 'quadratic', 'cubic', 'quartic'][method.degree - 1]!;
      return method.degree === 4 && distortionOf(method) === 'tied' ? 'quartic, D tied' : name;
    }
    case 'combination-differences': {
      const parts = [
        ...(method.intercept ? ['with intercept'] : []),
        ...(method.cubicTerm ? ['with cubic term'] : []),
      ];
      return ['combination differences', parts.join(' and ')].filter((s) => s !== '').join(' ');
    }
    case 'successive-differences':
      return 'successive differences';
    case 'single-branch':
      return `${method.branch} branch alone`;
    case 'midpoint':
      return 'midpoint of R(0) and P(1)';
  }
}

function distortionOf(method: Extract<PrescribedMethod, { fit: 'polynomial' }>): 'tied' | 'free' {
  return method.distortion ?? (method.degree === 4 ? 'free' : 'tied');
}
