import { describe, expect, it } from 'vitest';
import type { Session } from '../../../app/contract.ts';
import { placed, withoutPaths } from '../../../app/host/placed-session.ts';
import { freeId, SessionDocument } from '../../../app/host/session-document.ts';

const session: Session = {
  format: 'needlebeat/session',
  version: 1,
  title: 'Bench',
  recordings: [{ id: 'A', file: '../videos/a.mp4' }],
  views: [{ id: 'v1', recording: 'A', kind: 'plan', region: { x: 0, y: 0, width: 100, height: 100 } }],
  segments: [],
};
const segment = (id: string, start_s: number, end_s: number) => ({
  id,
  recording: 'A',
  view: 'v1',
  start_s,
  end_s,
  current_A: 0,
});
const place = { path: '/bench/s.needlebeat.json', sha256: 'on disk', asWritten: new Map([['A', '../videos/a.mp4']]) };
const open = () => new SessionDocument({ session, paths: new Map([['A', '/videos/a.mp4']]), place });

describe('the document', () => {
  it('shows the window base names alone', () => {
    expect(open().session.recordings).toEqual([{ id: 'A', file: 'a.mp4' }]);
    const windows = { ...session, recordings: [{ id: 'A', file: 'D:\\films\\b.mov' }] };
    expect(withoutPaths(windows).recordings[0]?.file).toBe('b.mov');
  });

  it('is dirty exactly while it differs from its file, undo included', () => {
    const document = open();
    expect(document.dirty).toBe(false);
    document.edit({ ...document.session, title: 'Other' }, 'Title', null);
    expect(document.dirty).toBe(true);
    document.undo();
    expect(document.dirty).toBe(false);
    document.redo();
    document.savedAt('/bench/s.needlebeat.json', document.textFor('/bench').session, 'new');
    expect(document.dirty).toBe(false);
    document.undo();
    expect(document.dirty).toBe(true);
  });

  it('refuses what a session file could not say, in the same words, and stays as it was', () => {
    const document = open();
    const overlapping = { ...document.session, segments: [segment('s1', 0, 10), segment('s2', 9, 20)] };
    expect(() => document.edit(overlapping, 'x', null)).toThrow(
      's.needlebeat.json: segments s1 and s2 overlap: s2 starts at 9 s, before s1 ends at 10 s.',
    );
    const stranger = {
      ...document.session,
      recordings: [...document.session.recordings, { id: 'B', file: '/etc/passwd' }],
    };
    expect(() => document.edit(stranger, 'x', null)).toThrow(/Recording B isn't part of this session/);
    expect(() => document.edit({ ...document.session, recordings: [], views: [] }, 'x', null)).toThrow(/at least one/);
    expect([document.dirty, document.undoLabel]).toEqual([false, null]);
  });

  it('lets the window change no file name', () => {
    const document = open();
    document.edit({ ...document.session, recordings: [{ id: 'A', file: '/etc/passwd', time_scale: 0.5 }] }, 'x', null);
    expect(document.session.recordings).toEqual([{ id: 'A', file: 'a.mp4', time_scale: 0.5 }]);
  });

  it('writes recordings relative to where the file goes', () => {
    const document = open();
    const fileIn = (folder: string | null) => document.textFor(folder).session.recordings[0]?.file;
    expect(fileIn('/bench')).toBe('../videos/a.mp4');
    expect(fileIn('/videos')).toBe('a.mp4');
    expect(fileIn('/videos/deep/er')).toBe('../../a.mp4');
    expect(fileIn(null)).toBe('a.mp4');
    const spelled = placed(session, document.paths, '/bench', new Map([['A', './../videos/a.mp4']]));
    expect(spelled.recordings[0]?.file).toBe('./../videos/a.mp4');
  });

  it('names the file on disk in results only while it is what is shown', () => {
    const document = open();
    expect(document.file().sha256).toBe('on disk');
    document.edit({ ...document.session, title: 'Other' }, 'x', null);
    expect(document.file().sha256).toBe(document.textFor('/bench').sha256);
    document.undo();
    expect(document.file().sha256).toBe('on disk');
    document.locate('A', '/elsewhere/a.mp4');
    expect([document.dirty, document.file().session.recordings[0]?.file]).toEqual([true, '../elsewhere/a.mp4']);
  });

  it('adds a recording under a free name, and undo takes it away', () => {
    const document = open();
    expect(document.addRecording('/videos/b.mp4')).toBe('B');
    document.undo();
    expect(document.session.recordings).toHaveLength(1);
    expect(document.addRecording('/videos/c.mp4')).toBe('C');
    expect(freeId(new Set('ABCDEFGHIJKLMNOPQRSTUVWXYZ'))).toBe('R1');
  });

  it('proposes a file name from the title that any system takes', () => {
    const named = (title: string) =>
      new SessionDocument({ session: { ...session, title }, paths: new Map(), place: null }).name;
    expect(named('Bench: 3/4?')).toBe('Bench 3 4.needlebeat.json');
    expect(named('')).toBe('a.needlebeat.json');
  });
});
