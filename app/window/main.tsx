import './styles/colours.css';
import './styles/base.css';
import './styles/layout.css';
import './styles/picture.css';
import './styles/time-board.css';
import './styles/sheets.css';
import './styles/tables.css';
import './styles/dialogs.css';
import 'uplot/dist/uPlot.min.css';
import { render } from 'preact';
import { connectHost } from '../contract/client.ts';
import { App } from './app.tsx';
import { listenForKeys } from './menu/key-dispatch.ts';
import { startWith } from './state/events.ts';
import { tellFailure } from './state/host.ts';
import { openTransport } from './transport.ts';

const place = document.getElementById('window');
if (place) {
  const client = connectHost(openTransport());
  startWith(client).catch(tellFailure);
  listenForKeys();
  render(<App />, place);
}
