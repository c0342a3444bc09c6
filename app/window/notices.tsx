import { Icon } from './parts/icons.tsx';
import { notices, putAway } from './state/notices.ts';

/** Short messages at the lower edge: words go by themselves, mistakes stay until they are put away. */
export function Notices() {
  return (
    <div class="notices">
      {notices.value.map(({ key, kind, text }) => (
        <div key={key} class="notice" data-kind={kind} role={kind === 'mistake' ? 'alert' : 'status'}>
          <span>{text}</span>
          <button type="button" class="small" aria-label="Put away" onClick={() => putAway(key)}>
            <Icon name="close" />
          </button>
        </div>
      ))}
    </div>
  );
}
