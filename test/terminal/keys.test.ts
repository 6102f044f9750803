import type { Key } from 'ink';
import { describe, expect, it } from 'vitest';
import { eventFor, hintedKeys, KEY_TABLE, type KeyMode } from '../../src/terminal/keys.ts';
import { strokesOf } from '../../src/terminal/strokes.ts';
import { VIEW_IDS } from '../../src/terminal/view-ids.ts';
import { press, readyState, startedState } from './made-state.ts';

const SIZE = { columns: 100, rows: 30 };
const NO_KEY: Key = {
  upArrow: false,
  downArrow: false,
  leftArrow: false,
  rightArrow: false,
  pageDown: false,
  pageUp: false,
  home: false,
  end: false,
  return: false,
  escape: false,
  ctrl: false,
  shift: false,
  tab: false,
  backspace: false,
  delete: false,
  meta: false,
  super: false,
  hyper: false,
  capsLock: false,
  numLock: false,
};

describe('strokesOf', () => {
  it('names arrows, with Shift too, and keys that have names', () => {
    expect(strokesOf('', { ...NO_KEY, upArrow: true })).toEqual(['up']);
    expect(strokesOf('', { ...NO_KEY, rightArrow: true, shift: true })).toEqual(['shift+right']);
    expect(strokesOf('', { ...NO_KEY, return: true, shift: true })).toEqual(['enter']);
    expect(strokesOf('', { ...NO_KEY, delete: true })).toEqual(['backspace']);
  });

  it('takes characters that arrive together as several strokes', () => {
    expect(strokesOf('++w\r', NO_KEY)).toEqual(['+', '+', 'w', 'enter']);
    expect(strokesOf('\u0003', NO_KEY)).toEqual(['ctrl+c']);
    expect(strokesOf('c', { ...NO_KEY, ctrl: true })).toEqual(['ctrl+c']);
    expect(strokesOf('', NO_KEY)).toEqual([]);
  });
});

describe('key table', () => {
  const modes = Object.entries(KEY_TABLE) as [KeyMode, (typeof KEY_TABLE)[KeyMode]][];

  it.each(modes)('names each stroke once in %s, and always has a way out', (_mode, rows) => {
    const strokes = rows.flatMap((row) => Object.keys(row.strokes));
    expect(new Set(strokes).size).toBe(strokes.length);
    expect(rows.find((row) => 'ctrl+c' in row.strokes)?.strokes['ctrl+c']).toEqual({ type: 'quit' });
  });

  it('has a number for every view', () => {
    const state = readyState(SIZE);
    for (const [i, view] of VIEW_IDS.entries())
      expect(eventFor(state, String(i + 1))).toEqual({ type: 'view', view });
  });

  it('has nothing to choose or to zoom before there is an answer, but can be quit and read', () => {
    const state = startedState(SIZE);
    for (const stroke of ['up', '+', 'w', '1', 'tab', 'enter']) expect(eventFor(state, stroke)).toBeNull();
    for (const stroke of ['q', '?', '!', 'ctrl+c']) expect(eventFor(state, stroke)).not.toBeNull();
    expect(hintedKeys(state).map(({ hint }) => hint?.word)).toEqual(['keys', 'quit', 'cable', 'm/ft']);
  });

  it('types letters into a list, q among them, and nowhere else', () => {
    const open = press(readyState(SIZE), 'c').state;
    expect(eventFor(open, 'q')).toEqual({ type: 'pickType', text: 'q' });
    expect(eventFor(open, '/')).toEqual({ type: 'pickType', text: '/' });
    expect(eventFor(open, 'f5')).toBeNull();
    expect(eventFor(readyState(SIZE), 'x')).toBeNull();
  });
});
