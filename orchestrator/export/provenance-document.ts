import { basename } from 'node:path';
import type { View } from '../store/reading.js';
import type { ColumnRecord, RunRecord } from '../store/records.js';

export interface Exported {
  readonly run: RunRecord;
  readonly view: View;
  readonly columns: readonly ColumnRecord[];
  /** Path of the exported file; only its last part is written. */
  readonly file: string;
  readonly rows: number;
}

/** What lies beside an export: what its columns mean, in which units, and how its numbers came about.
 *  Plain data, fit for JSON.
 *  Source: W3C "Metadata Vocabulary for Tabular Data" (CSVW, 2015) for the table, W3C PROV-O (2013) for its origin */
export function provenanceDocument(exported: Exported): Record<string, unknown> {
  const { run, view, columns, file, rows } = exported;
  return {
    '@context': [
      'http://www.w3.org/ns/csvw',
      { prov: 'http://www.w3.org/ns/prov#', schema: 'http://schema.org/', trigpoint: 'urn:trigpoint:' },
    ],
    url: basename(file),
    'dc:title': run.title,
    dialect: { encoding: 'utf-8', header: true, lineTerminators: ['\r\n'], delimiter: ',' },
    tableSchema: { columns: columns.map(columnEntry), primaryKey: ['stratum', 'index'] },
    'trigpoint:filter': view.where,
    'trigpoint:rows': rows,
    'prov:wasGeneratedBy': activity(run),
  };
}

/** The name for the document beside an export. */
export function provenanceFileOf(file: string): string {
  return `${file.replace(/\.(csv|parquet|sqlite)$/, '')}.provenance.json`;
}

function columnEntry(column: ColumnRecord): Record<string, unknown> {
  const entry = {
    titles: column.name,
    datatype: datatypeOf(column),
    'dc:description': column.meaning,
    'schema:unitText': column.unit,
    'trigpoint:kind': column.kind,
  };
  const absent = column.absent === undefined ? {} : { 'trigpoint:absent': column.absent };
  const caution = column.caution === undefined ? {} : { 'trigpoint:caution': column.caution };
  return { ...entry, ...absent, ...caution };
}

function datatypeOf(column: ColumnRecord): unknown {
  if (column.labels !== undefined) return { base: 'string', 'trigpoint:labels': column.labels };
  return column.name === 'stratum' || column.name === 'index' ? 'integer' : 'double';
}

function activity(run: RunRecord): Record<string, unknown> {
  return {
    '@type': 'prov:Activity',
    'trigpoint:run': run.id,
    'trigpoint:relation': run.relation,
    'trigpoint:parent': run.parent,
    'trigpoint:state': run.state,
    'trigpoint:digest': run.digest,
    'trigpoint:counts': run.counts,
    'prov:startedAtTime': run.started,
    'prov:endedAtTime': run.finished,
    'trigpoint:seconds': run.seconds,
    'prov:used': {
      '@type': 'prov:Plan',
      'trigpoint:plan': JSON.parse(run.plan) as unknown,
      'trigpoint:scanFile': run.scanFile,
      'trigpoint:fingerprints': run.fingerprints,
    },
    'prov:wasAssociatedWith': { '@type': 'prov:SoftwareAgent', ...environmentEntries(run) },
  };
}

function environmentEntries(run: RunRecord): Record<string, unknown> {
  return Object.fromEntries(
    Object.entries(run.environment).map(([name, value]) => [`trigpoint:${name}`, value]),
  );
}
