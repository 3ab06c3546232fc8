import { quote } from './delimited-columns';
import type { ReadRequest } from './raw-table';

/** Column names as they are used, or an error that says what is wrong with them. */
export function checkNames(
  names: readonly string[],
  line: number,
  request: ReadRequest,
  warnings: string[],
): readonly string[] {
  const seen = new Map<string, number>();
  return names.map((given, j) => {
    if (given.includes('\ufffd')) {
      throw new Error(
        `${request.where}, line ${line}: the column names are not UTF-8 (${quote(given)}). Save the file as UTF-8.`,
      );
    }
    let name = given;
    if (name === '') {
      name = `column${j + 1}`;
      warnings.push(`Column ${j + 1} has no name; it is called "${name}".`);
    }
    const before = seen.get(name);
    if (before !== undefined) {
      throw new Error(
        `${request.where}, line ${line}: columns ${before + 1} and ${j + 1} are both named ${quote(name)}. Rename one, or pass columnNames: ['...'] with all ${names.length} names.`,
      );
    }
    seen.set(name, j);
    return name;
  });
}
