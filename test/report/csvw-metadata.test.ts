import { describe, expect, it } from 'vitest';
import { csvwFileName, csvwMetadata, csvwText } from '../../src/report/csvw-metadata.ts';
import { resultsCsv } from '../../src/report/results-csv.ts';
import { exampleResults, withSegment } from './support/results-fixture.ts';
import { parseRfc4180, rowsByName } from './support/rfc4180.ts';

interface DescribedColumn {
  name: string;
  titles: string[];
  datatype: string | { base: string; format: string };
  required?: boolean;
  separator?: string;
  'dc:description': string;
  'schema:unitText'?: string;
  'schema:unitCode'?: string;
}

const metadata = csvwMetadata() as { url: string; tableSchema: { columns: DescribedColumn[]; primaryKey: string } };
const described = metadata.tableSchema.columns;

/** Whether a cell is a literal of its column's datatype (XML Schema Part 2, as CSVW takes it over). */
function fits(column: DescribedColumn, cell: string): boolean {
  if (cell === '') return column.required !== true;
  if (column.datatype === 'double') return /^[+-]?(\d+(\.\d*)?|\.\d+)([eE][+-]?\d+)?$/.test(cell);
  if (column.datatype === 'nonNegativeInteger') return /^\d+$/.test(cell);
  return typeof column.datatype === 'string' || new RegExp(column.datatype.format).test(cell);
}

// Source of the rules: W3C Recommendation "Metadata Vocabulary for Tabular Data", 17 December 2015, sections 5.3 to 5.6.
describe('the CSVW metadata', () => {
  it('names exactly the columns of results.csv, in their order, by its header’s titles', () => {
    const [header] = parseRfc4180(resultsCsv(exampleResults()));
    expect(described.map((column) => column.name)).toEqual(header);
    for (const column of described) expect(column.titles[0]).toBe(column.name);
  });

  it('uses names that the vocabulary allows: no leading underscore, nothing to be encoded', () => {
    for (const { name } of described) expect(name).toMatch(/^[A-Za-z0-9][A-Za-z0-9_.]*$/);
  });

  it('belongs to the file by its own name and address', () => {
    expect(csvwFileName).toBe('results.csv-metadata.json');
    expect(metadata.url).toBe('results.csv');
    expect(metadata).toMatchObject({ '@context': ['http://www.w3.org/ns/csvw', { '@language': 'en' }] });
    expect(JSON.parse(csvwText())).toEqual(metadata);
  });

  it('gives types that every written cell has', () => {
    const results = withSegment(0, { u_f0_Hz: 1.25e-9, current_A: -1e-7 });
    for (const row of rowsByName(resultsCsv(results))) {
      for (const column of described) {
        expect(fits(column, row[column.name] ?? ''), `${column.name}: "${row[column.name]}"`).toBe(true);
      }
    }
  });

  it('gives the unit that the name of a column ends in, and none to words', () => {
    const units: [RegExp, string][] = [
      [/_s$/, 's'],
      [/_Hz$/, 'Hz'],
      [/_A$/, 'A'],
      [/_per_s$/, '1/s'],
      [/_deg$/, '°'],
    ];
    for (const column of described) {
      const unit = units.filter(([end]) => end.test(column.name)).at(-1)?.[1];
      if (unit) expect(column['schema:unitText']).toBe(column.name.endsWith('_per_s') ? '1/s' : unit);
      if (column.datatype === 'string' || typeof column.datatype === 'object') {
        expect(column['schema:unitText']).toBeUndefined();
      } else expect(column['schema:unitCode']).toMatch(/^UCUM:/);
      expect(column['dc:description']).toMatch(/\.$/);
    }
  });

  it('splits the codes of checks and names the row by its id', () => {
    expect(described.find((column) => column.name === 'checks')?.separator).toBe(';');
    expect(metadata.tableSchema.primaryKey).toBe('id');
  });
});
