import { type Column, columns } from './columns.ts';

/** Name of the metadata file that belongs to results.csv, by section 5.3 of "Model for Tabular Data and Metadata on the Web". */
export const csvwFileName = 'results.csv-metadata.json';

/**
 * Metadata of results.csv by the W3C Recommendation "Metadata Vocabulary for Tabular Data" (2015): names, types, titles,
 * descriptions and units of its columns, ready to be written. Units stand in schema.org's `unitText`, and as UCUM code in
 * `unitCode`.
 */
export function csvwMetadata(): object {
  return {
    '@context': ['http://www.w3.org/ns/csvw', { '@language': 'en' }],
    url: 'results.csv',
    'dc:title': 'Oscillation of a suspended magnet: one row per segment',
    'dc:description':
      'Each row is a stretch of recording at one coil current with the frequency and damping of its ring-down. Names that begin with u_ are standard uncertainties (k = 1) of the quantity named after it. Empty: not to be had. A text that a spreadsheet would take for a formula has an apostrophe in front.',
    dialect: {
      encoding: 'utf-8',
      delimiter: ',',
      quoteChar: '"',
      doubleQuote: true,
      header: true,
      headerRowCount: 1,
      lineTerminators: ['\r\n'],
    },
    tableSchema: {
      columns: columns.map(describeColumn),
      primaryKey: 'id',
    },
  };
}

/** The metadata as the text of its file. */
export function csvwText(): string {
  return `${JSON.stringify(csvwMetadata(), null, 2)}\n`;
}

function describeColumn(column: Column): object {
  return {
    name: column.name,
    // The header's own spelling comes first: a validator compares it with the file.
    titles: [column.name, column.title],
    'dc:description': column.description,
    datatype: datatype(column),
    ...(column.type === 'codes' && { separator: ';' }),
    ...(column.mayBeEmpty && column.type !== 'codes' ? { null: '' } : {}),
    ...(!column.mayBeEmpty && { required: true }),
    ...(column.unit && { 'schema:unitText': column.unit.text, 'schema:unitCode': `UCUM:${column.unit.ucum}` }),
  };
}

function datatype(column: Column): string | object {
  if (column.type === 'number') return 'double';
  if (column.type === 'count') return 'nonNegativeInteger';
  return column.values ? { base: 'string', format: `^(${column.values.join('|')})$` } : 'string';
}
