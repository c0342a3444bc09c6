import type { Saved } from '../contract.ts';
import { allExports, type ExportFile, type ExportSource, exportFile } from './export-files.ts';
import type { Parts, Some } from './parts.ts';
import type { Savable } from './saving.ts';
import { Refusal } from './serve-window.ts';

/** Calls that save and export. An export waits until everything that can be measured is. */
export function savingCalls({
  options,
  keeper,
  measuring,
  saving,
}: Parts): Some<'save' | 'exportItem' | 'exportAll' | 'saveBytes'> {
  const source = async (signal: AbortSignal): Promise<ExportSource> => {
    keeper.need();
    await measuring.settled(signal);
    const results = measuring.results();
    if (!results) throw new Refusal('bad_input', 'Nothing has been measured yet.');
    const session = await keeper.handOut(false);
    return { results, segments: measuring.current(), session, madeOn: options.now().slice(0, 10) };
  };
  const report = async (token: string | undefined, signal: AbortSignal): Promise<Saved> => {
    if (options.shell && token === undefined) return { saved: 'needs_place', suggestedName: 'report.pdf' };
    const page = exportFile({ kind: 'report' }, await source(signal));
    if (!page) throw new Refusal('bad_input', 'There is no report yet.');
    if (!options.shell) return saving.toPrint(savable(page));
    const bytes = await options.shell.printPdf(page.text);
    return saving.save({ name: 'report.pdf', type: 'application/pdf', bytes }, token);
  };
  const savable = (file: ExportFile) => ({ ...file, bytes: file.text }) satisfies Savable;
  return {
    save: async ({ token, asCopy }) => {
      const { place, name } = keeper.need();
      const path = token !== undefined ? saving.placeOf(token, 'write') : asCopy ? undefined : place?.path;
      if (path !== undefined) {
        await keeper.saveTo(path);
        return { saved: 'file', name: keeper.need().name };
      }
      if (!options.browser) return { saved: 'needs_place', suggestedName: name };
      const { text } = await keeper.handOut(true);
      return saving.save({ name, type: 'application/json', bytes: text }, undefined);
    },
    exportItem: async ({ item, token }, { signal }) => {
      if (item.kind === 'report.pdf') return report(token, signal);
      const file = exportFile(item, await source(signal));
      if (!file) throw new Refusal('bad_input', 'There is no trace of this segment: no bar was followed in it.');
      return saving.save(savable(file), token);
    },
    exportAll: async ({ token }, { signal }) => {
      const files = allExports(await source(signal));
      return saving.saveAll(files.map(savable), token);
    },
    saveBytes: ({ name, bytes, token }) => {
      const safe = name.replace(/[\\/:*?"<>|]/g, '_').replace(/^\.+/, '_');
      return saving.save({ name: safe, type: typeOf(safe), bytes }, token);
    },
  };
}

function typeOf(name: string): string {
  if (/\.svg$/i.test(name)) return 'image/svg+xml';
  return /\.png$/i.test(name) ? 'image/png' : 'application/octet-stream';
}
