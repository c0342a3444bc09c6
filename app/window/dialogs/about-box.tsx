import { useEffect, useState } from 'preact/hooks';
import type { Result } from '../../contract.ts';
import { closeDialog } from '../state/dialogs.ts';
import { ask, hello } from '../state/host.ts';
import { DialogFrame } from './dialog-frame.tsx';

/** Versions, the ffmpeg in use, and the cautions. */
export function AboutBox() {
  const [facts, setFacts] = useState<Result<'about'> | null>(null);
  useEffect(() => {
    void ask('about', {}).then(setFacts);
  }, []);
  const rows: [string, string][] = facts
    ? [
        [facts.program, facts.version],
        ...facts.runtime.map(({ name, version }): [string, string] => [name, version]),
        ['ffmpeg', facts.ffmpeg ? `${facts.ffmpeg.version} (${facts.ffmpeg.source})` : 'not found'],
        ['ffprobe', facts.ffprobe?.version ?? 'not found'],
      ]
    : [];
  return (
    <DialogFrame title="About Needlebeat" wide>
      <p>Times the oscillation of a suspended magnet from a phone recording.</p>
      <table class="about-table">
        <tbody>
          {rows.map(([name, text]) => (
            <tr key={name}>
              <th scope="row">{name}</th>
              <td>{text}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <h3>Cautions</h3>
      <ul class="cautions">
        {hello.value?.cautions.map((text) => (
          <li key={text}>{text}</li>
        ))}
      </ul>
      <div class="dialog-buttons">
        <button type="button" class="primary" onClick={() => closeDialog()}>
          Close
        </button>
      </div>
    </DialogFrame>
  );
}
