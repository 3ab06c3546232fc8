/** Bytes that end with a line end, so that a scan needs no test for the end of the file inside a cell. */
export function withFinalLineEnd(bytes: Uint8Array): Uint8Array {
  const last = bytes[bytes.length - 1];
  if (last === 10 || last === 13) return bytes;
  const out = new Uint8Array(bytes.length + 1);
  out.set(bytes);
  out[bytes.length] = 10;
  return out;
}

/**
 * The bytes of a text without byte-order mark.
 * @throws Error when they are no text that Coeval reads: another encoding, or a binary format, which is named
 */
export function checkTextBytes(bytes: Uint8Array, where: string): Uint8Array {
  const at = (k: number) => bytes[k] ?? -1;
  if ((at(0) === 0xff && at(1) === 0xfe) || (at(0) === 0xfe && at(1) === 0xff)) {
    throw new Error(`${where}: the file is UTF-16 text. Save it as UTF-8.`);
  }
  if (at(0) === 0xef && at(1) === 0xbb && at(2) === 0xbf) return checkTextBytes(bytes.subarray(3), where);
  const head = String.fromCharCode(...bytes.subarray(0, 4096));
  const format = BINARY_FORMATS.find(([start]) => head.trimStart().startsWith(start));
  if (format)
    throw new Error(`${where}: this is ${format[1]}; Coeval reads CSV, TSV and ECSV. Save the table as one of these.`);
  // Every other byte of UTF-16 text in Latin letters is zero; UTF-8 text holds none.
  const zeros = head.split('\0').length - 1;
  if (zeros > head.length / 4) throw new Error(`${where}: the file looks like UTF-16 text. Save it as UTF-8.`);
  const control = head.match(CONTROL)?.length ?? 0;
  if (zeros > 0 || control > head.length / 50) {
    const offset = head.search(CONTROL);
    const byte = head.charCodeAt(offset).toString(16).padStart(2, '0');
    throw new Error(`${where}: not a text file (byte 0x${byte} at offset ${offset}). Coeval reads CSV, TSV and ECSV.`);
  }
  return bytes;
}

/** First characters of files that are often taken for tables, and what they are. */
const BINARY_FORMATS: readonly (readonly [string, string])[] = [
  ['SIMPLE  =', 'a FITS file'],
  ['PAR1', 'a Parquet file'],
  ['ARROW1', 'an Arrow file'],
  ['PK\x03\x04', 'a zip archive or spreadsheet'],
  ['%PDF', 'a PDF document'],
  ['\x89HDF', 'an HDF5 file'],
  ['\x93NUMPY', 'a NumPy array'],
  ['BZh', 'a bzip2 archive'],
  ['\xfd7zXZ', 'an xz archive'],
  ['<?xml', 'an XML document'],
  ['<VOTABLE', 'a VOTable'],
  ['<!DOCTYPE', 'an HTML page'],
  ['<html', 'an HTML page'],
];

/** Control characters that text tables hold rarely, if ever. */
// biome-ignore lint/suspicious/noControlCharactersInRegex: looking for them is the point
const CONTROL = /[\0-\x08\x0e-\x1a\x1c-\x1f]/g;
