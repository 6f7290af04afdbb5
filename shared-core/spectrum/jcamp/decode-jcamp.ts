import type { Reason } from '../../units/types.ts';
import { counted, quoted, refuse } from '../refusal.ts';
import { dataRecord, decodeBlock, type JcampPoints } from './decode-block.ts';
import { readBlocks, recordOf, type JcampBlock } from './records.ts';

const knownRecord =
  /^\s*##\s*(?:TITLE|JCAMP|DATA\s*TYPE|DATA\s*CLASS|XYDATA|XYPOINTS|NPOINTS|FIRSTX|LASTX|DELTAX|XUNITS|YUNITS|XFACTOR|YFACTOR|FIRSTY|MAXY|MINY|ORIGIN|OWNER|BLOCKS|END)[^=\n]*=/im;

/** Whether a text is (or was) JCAMP-DX: one of its records stands near the beginning or at the end. */
export function looksLikeJcamp(text: string): boolean {
  return knownRecord.test(text.slice(0, 20_000)) || knownRecord.test(text.slice(-400));
}

function leavesOf(blocks: readonly JcampBlock[]): JcampBlock[] {
  return blocks.flatMap((block) => (block.children.length > 0 ? leavesOf(block.children) : [block]));
}

const isPerCm = (units: string): boolean =>
  /1\s*\/\s*CM|CM\s*\^?\s*-\s*1|RECIPROCAL CENT|WAVENUMBER|KAYSER/i.test(units);

function typeOf(block: JcampBlock): string {
  return (recordOf(block, 'DATATYPE')?.value ?? '').toUpperCase();
}

/** Infrared by its data type, or without a data type of another technique by its units. */
function isInfrared(block: JcampBlock): boolean {
  const type = typeOf(block);
  if (type.includes('INTERFEROGRAM') || type.includes('PEAK')) return false;
  if (/INFRA-?\s*RED|FT-?IR|\bIR\b/.test(type)) return true;
  if (/RAMAN|NMR|NUCLEAR|MASS|UV|VIS|ESR|EPR|CHROMATO|X-?RAY|DIFFRACT|FLUOR|FID|LINK/.test(type))
    return false;
  const units = recordOf(block, 'XUNITS')?.value ?? '';
  return isPerCm(units) || /MICRO|NANOM/i.test(units);
}

function refuseOtherTechnique(blocks: readonly JcampBlock[]): never {
  const first = blocks[0]!;
  const type = typeOf(first) || 'of no stated data type';
  const where = recordOf(first, 'DATATYPE')?.line ?? first.line;
  const interferogram = blocks.find((block) => typeOf(block).includes('INTERFEROGRAM'));
  if (interferogram) {
    refuse(
      'interferogram',
      'The file holds an interferogram, not a spectrum: let the instrument transform it and hand in absorbance or transmittance.',
      recordOf(interferogram, 'DATATYPE')!.line,
    );
  }
  const many = blocks.length > 1 ? ` and ${counted(blocks.length - 1, 'more block')}` : '';
  refuse(
    'not-infrared',
    `The file holds no infrared spectrum (it is ${quoted(type)}${many}): hand in the infrared spectrum of the gas.`,
    where,
  );
}

/** All blocks of a JCAMP-DX text that hold points, decoded strictly, of whatever technique. */
export function decodeJcamp(text: string): JcampPoints[] {
  const lines = text.split(/\r\n|\n|\r/);
  return leavesOf(readBlocks(lines))
    .filter((block) => dataRecord(block) !== null)
    .map((block) => decodeBlock(block, lines));
}

/**
 * The infrared blocks of a JCAMP-DX file; what was passed over stands in the notes.
 * @throws RefusedFile where there is none or one is damaged
 */
export function readInfraredBlocks(lines: readonly string[]): JcampPoints[] {
  const blocks = leavesOf(readBlocks(lines));
  const infrared = blocks.filter(isInfrared);
  if (infrared.length === 0) refuseOtherTechnique(blocks);
  if (blocks.some((block) => recordOf(block, 'NTUPLES')) && !infrared.some(dataRecord)) {
    refuse(
      'jcamp-ntuples',
      `The block on line ${infrared[0]!.line} is an NTUPLES table, which holds several kinds of values: export the spectrum as XYDATA.`,
      infrared[0]!.line,
    );
  }
  const withData = infrared.filter((block) => dataRecord(block) !== null);
  const decoded = (withData.length > 0 ? withData : infrared).map((block) => decodeBlock(block, lines));
  const passedOver = blocks.filter((block) => !withData.includes(block));
  if (blocks.length === 1) return decoded;
  const note: Reason = {
    code: 'jcamp-block-picked',
    text:
      `The file holds ${blocks.length} blocks; ` +
      (passedOver.length === 0
        ? 'all are infrared spectra.'
        : `taken: ${decoded.map((block) => `line ${block.line}`).join(', ')} (infrared); passed over: ${passedOver
            .map((block) => `line ${block.line} (${typeOf(block).toLowerCase() || 'no data type'})`)
            .join(', ')}.`),
  };
  return decoded.map((block) => ({ ...block, notes: [...block.notes, note] }));
}
