import { describe, expect, test } from 'vitest';
import { commands } from '../../../../app/contract.ts';
import { type KeyPress, keysText, matches, worksInFields } from '../../../../app/window/menu/accelerators.ts';

const press = (key: string, more: Partial<KeyPress> = {}): KeyPress => ({
  key,
  code: '',
  ctrlKey: false,
  metaKey: false,
  shiftKey: false,
  altKey: false,
  ...more,
});

describe('shortcuts', () => {
  test('Ctrl here is Cmd there', () => {
    expect(matches(press('z', { ctrlKey: true }), 'CmdOrCtrl+Z', false)).toBe(true);
    expect(matches(press('z', { metaKey: true }), 'CmdOrCtrl+Z', true)).toBe(true);
    expect(matches(press('z', { ctrlKey: true }), 'CmdOrCtrl+Z', true)).toBe(false);
    expect(matches(press('Z', { ctrlKey: true, shiftKey: true }), 'CmdOrCtrl+Z', false)).toBe(false);
    expect(matches(press('Z', { ctrlKey: true, shiftKey: true }), 'CmdOrCtrl+Shift+Z', false)).toBe(true);
  });

  test('signs count wherever they stand on the keyboard, digits go by their key', () => {
    expect(matches(press('+', { shiftKey: true }), '+', false)).toBe(true);
    expect(matches(press('-'), '-', false)).toBe(true);
    expect(matches(press(')', { code: 'Digit0', shiftKey: true }), 'Shift+0', false)).toBe(true);
    expect(matches(press('0', { code: 'Digit0' }), 'Shift+0', false)).toBe(false);
  });

  test('no key press means two commands', () => {
    const presses = commands.flatMap((c) => (c.accelerator === null ? [] : [c.accelerator]));
    expect(new Set(presses).size).toBe(presses.length);
  });

  test('letters are for the window, not for text fields', () => {
    expect(worksInFields('C')).toBe(false);
    expect(worksInFields('CmdOrCtrl+S')).toBe(true);
    expect(keysText('CmdOrCtrl+Shift+S')).toBe('Ctrl+Shift+S');
    expect(keysText('Shift+Left')).toBe('Shift+←');
  });
});
