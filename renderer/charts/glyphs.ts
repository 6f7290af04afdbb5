/** Shapes that tell isotopologues apart; the same in pictures, tables and legends. */
export const glyphNames = ['circle', 'square', 'triangle', 'diamond', 'cross'] as const;
export type GlyphName = (typeof glyphNames)[number];

/** Shape of the isotopologue at a place of the list of isotopologues (the sixth begins again). */
export function glyphAt(index: number): GlyphName {
  return glyphNames[((index % glyphNames.length) + glyphNames.length) % glyphNames.length]!;
}

/** Puts the outline of a shape of radius r around (x, y) on the canvas path. */
export function traceGlyph(
  context: CanvasRenderingContext2D,
  name: GlyphName,
  x: number,
  y: number,
  r: number,
): void {
  context.beginPath();
  if (name === 'circle') context.arc(x, y, r, 0, 2 * Math.PI);
  else if (name === 'square') context.rect(x - r * 0.9, y - r * 0.9, r * 1.8, r * 1.8);
  else if (name === 'cross') {
    context.moveTo(x - r, y - r);
    context.lineTo(x + r, y + r);
    context.moveTo(x + r, y - r);
    context.lineTo(x - r, y + r);
  } else {
    const tall = r * 1.25;
    context.moveTo(x, y - tall);
    context.lineTo(x + tall, name === 'diamond' ? y : y + r);
    if (name === 'diamond') context.lineTo(x, y + tall);
    context.lineTo(x - tall, name === 'diamond' ? y : y + r);
    context.closePath();
  }
}
