import { useEffect } from 'preact/hooks';
import { Dialogs } from './dialogs/dialogs.tsx';
import { Drops } from './drops.tsx';
import { EmptyState } from './empty-state.tsx';
import { Notices } from './notices.tsx';
import { PicturePanel } from './picture/picture-panel.tsx';
import { Sheets } from './sheets.tsx';
import { Splitter } from './splitter.tsx';
import { documentState, session } from './state/document.ts';
import { boardShare, sheetShare } from './state/layout.ts';
import { sheet } from './state/selection.ts';
import { TimeBoard } from './time-board/time-board.tsx';
import { TopBar } from './top-bar.tsx';

/** The one window: picture and sheet above, time board below. */
export function App() {
  useEffect(() => {
    const name = session.value?.title || documentState.value?.fileName;
    document.title = name ? `${name} – Needlebeat` : 'Needlebeat';
  }, [session.value?.title, documentState.value?.fileName]);
  const open = session.value !== null;
  return (
    <div class="app" data-sheet={sheet.value}>
      <TopBar />
      {open ? (
        <main class="work" style={{ '--sheet-share': sheetShare.value, '--board-share': boardShare.value }}>
          <PicturePanel />
          <Splitter way="sheet" />
          <Sheets />
          <Splitter way="board" />
          <TimeBoard />
        </main>
      ) : (
        <EmptyState />
      )}
      <Notices />
      <Dialogs />
      <Drops />
    </div>
  );
}
