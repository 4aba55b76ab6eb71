import type { Cards } from '../cards';
import type { Column, Table } from '../columns/table';
import { problemAt, type Place } from '../place';
import { AsciiColumn } from './ascii-column';
import { BinaryColumn, type BinaryLayout, type ColumnCards } from './binary-column';
import type { Hdu } from './read-hdus';
import { parseAsciiFormat, parseBinaryFormat } from './table-format';

const MAX_COLUMNS = 999;

function ownText(cards: Cards, keyword: string): string | null {
  return cards.own(keyword) ? cards.text(keyword) : null;
}

function ownNumber(cards: Cards, keyword: string): number | null {
  return cards.own(keyword) ? cards.number(keyword) : null;
}

function columnCards(cards: Cards, n: number): ColumnCards {
  return {
    name: ownText(cards, `TTYPE${n}`) ?? `column ${n}`,
    unit: ownText(cards, `TUNIT${n}`),
    ucd: ownText(cards, `TUCD${n}`),
    utype: ownText(cards, `TUTYP${n}`) ?? ownText(cards, `TUTYPE${n}`),
    description: ownText(cards, `TCOMM${n}`) ?? ownText(cards, `TDESC${n}`),
    coordinateType: ownText(cards, `TCTYP${n}`) ?? ownText(cards, `TCTY${n}`),
    scale: ownNumber(cards, `TSCAL${n}`) ?? 1,
    zero: ownNumber(cards, `TZERO${n}`) ?? 0,
    undefinedInteger: ownNumber(cards, `TNULL${n}`),
  };
}

function rowTooShort(place: Place, name: string, needed: number, rowBytes: number) {
  return problemAt(
    { ...place, detail: `column ${name}` },
    'fits-row-too-short',
    `The column ends at byte ${needed} of a row, but NAXIS1 gives a row ${rowBytes} bytes.`,
    'TFORMn and NAXIS1 disagree: write the table again.',
  );
}

/**
 * Reads the columns of a binary or ASCII table HDU (FITS 4.0, sections 7.2 and 7.3). Cells are read when asked for.
 *
 * @throws InputProblem where the header describes no table that fits its rows.
 */
export function readTable(hdu: Hdu, file: string): Table {
  const place: Place = { file, extension: hdu.extension };
  const [rowBytes = 0, rows = 0] = hdu.axes;
  const fields = ownNumber(hdu.cards, 'TFIELDS') ?? 0;
  if (
    hdu.axes.length !== 2 ||
    !Number.isInteger(fields) ||
    fields < 0 ||
    fields > MAX_COLUMNS ||
    rowBytes * rows > hdu.data.length ||
    rows > hdu.data.length
  ) {
    throw problemAt(
      place,
      'fits-table-invalid',
      'NAXIS or TFIELDS of this table is not valid.',
      'Write the table again.',
    );
  }
  const heap = ownNumber(hdu.cards, 'THEAP') ?? rowBytes * rows;
  const heapStart =
    Number.isSafeInteger(heap) && heap >= rowBytes * rows && heap <= hdu.data.length ? heap : hdu.data.length;
  const layout: BinaryLayout = { data: hdu.data, rowBytes, rows, heapStart };
  const columns: Column[] = [];
  let offset = 0;
  for (let n = 1; n <= fields; n++) {
    const form = ownText(hdu.cards, `TFORM${n}`) ?? '';
    const cards = columnCards(hdu.cards, n);
    const columnPlace = { ...place, detail: `column ${n}` };
    if (hdu.kind === 'ascii table') {
      const format = parseAsciiFormat(form, columnPlace);
      const start = (ownNumber(hdu.cards, `TBCOL${n}`) ?? 0) - 1;
      if (!Number.isInteger(start) || start < 0 || start + format.width > rowBytes) {
        throw rowTooShort(place, cards.name, start + format.width, rowBytes);
      }
      columns.push(new AsciiColumn(layout, format, start, cards, ownText(hdu.cards, `TNULL${n}`)));
    } else {
      const format = parseBinaryFormat(form, columnPlace);
      if (offset + format.width > rowBytes) throw rowTooShort(place, cards.name, offset + format.width, rowBytes);
      columns.push(new BinaryColumn(layout, format, offset, cards, place));
      offset += format.width;
    }
  }
  return { extension: hdu.extension, name: hdu.name, rows, columns, cards: hdu.cards, remarks: [] };
}
