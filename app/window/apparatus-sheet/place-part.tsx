import { useEffect, useState } from 'preact/hooks';
import { NumberField } from '../parts/number-field.tsx';
import { edit } from '../state/document.ts';
import { type Place, withPlace } from './apparatus-fields.ts';

interface Draft {
  readonly latitude_deg: number | null;
  readonly longitude_deg: number | null;
  readonly height_m: number | null;
  readonly date: string;
}

const NOWHERE: Draft = { latitude_deg: null, longitude_deg: null, height_m: 0, date: '' };

/** Where and when the recording was made; with it the expected field stands beside the measured one. */
export function PlacePart({ place }: { place: Place | undefined }) {
  const [draft, setDraft] = useState<Draft>(place ?? NOWHERE);
  const [mistake, setMistake] = useState<string | null>(null);
  useEffect(() => {
    if (place) setDraft(place);
  }, [place]);

  function set(change: Partial<Draft>): void {
    const next = { ...draft, ...change };
    setDraft(next);
    const { latitude_deg, longitude_deg, height_m, date } = next;
    const wrong = date !== '' && !/^\d{4}-\d{2}-\d{2}$/.test(date);
    setMistake(wrong ? 'Date must be a day as 2026-12-01.' : null);
    if (wrong) return;
    if (latitude_deg !== null && longitude_deg !== null && height_m !== null && date !== '') {
      edit('Place', (s) => withPlace(s, { latitude_deg, longitude_deg, height_m, date }), 'place');
    } else if (place) edit('Place', (s) => withPlace(s, undefined), 'place');
  }

  return (
    <div class="rig-part place">
      <NumberField
        caption="Latitude N"
        label="Latitude"
        unit="°"
        value={draft.latitude_deg}
        optional
        rule={{ least: -90, most: 90 }}
        entry="latitude"
        onValue={(latitude_deg) => set({ latitude_deg })}
      />
      <NumberField
        caption="Longitude E"
        label="Longitude"
        unit="°"
        value={draft.longitude_deg}
        optional
        rule={{ least: -180, most: 360 }}
        entry="longitude"
        onValue={(longitude_deg) => set({ longitude_deg })}
      />
      <NumberField
        caption="Height"
        label="Height"
        unit="m"
        value={draft.height_m}
        optional
        rule={{ least: -1000, most: 100_000 }}
        entry="height"
        onValue={(height_m) => set({ height_m })}
      />
      <span class="number-field">
        <label for="place-date">Date</label>
        <input
          id="place-date"
          type="date"
          value={draft.date}
          aria-invalid={mistake !== null}
          onChange={(event) => set({ date: event.currentTarget.value })}
        />
      </span>
      {mistake === null ? null : (
        <span class="mistake" role="alert">
          {mistake}
        </span>
      )}
    </div>
  );
}
