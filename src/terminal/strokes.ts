/** What the keyboard sent, as names of strokes: "up", "shift+left", "ctrl+c", "enter", "+". */
import type { Key } from 'ink';

/** Name of one stroke. */
export type Stroke = string;

const CONTROL_STROKES: Readonly<Record<string, Stroke>> = {
  '\r': 'enter',
  '\n': 'enter',
  '\t': 'tab',
  '\u001b': 'esc',
  '\u007f': 'backspace',
  '\b': 'backspace',
};

/**
 * Names the strokes of one piece of input.
 *
 * Several characters that arrive together (a fast hand, a slow line) are several strokes.
 */
export function strokesOf(input: string, key: Key): readonly Stroke[] {
  const named = namedStroke(key);
  if (named) return [key.shift && named !== 'enter' && named !== 'esc' ? `shift+${named}` : named];
  if (key.ctrl && input.length > 0) return [`ctrl+${input.toLowerCase()}`];
  return [...input].map(characterStroke);
}

function namedStroke(key: Key): Stroke | null {
  if (key.upArrow) return 'up';
  if (key.downArrow) return 'down';
  if (key.leftArrow) return 'left';
  if (key.rightArrow) return 'right';
  if (key.pageUp) return 'pageup';
  if (key.pageDown) return 'pagedown';
  if (key.home) return 'home';
  if (key.end) return 'end';
  if (key.return) return 'enter';
  if (key.escape) return 'esc';
  if (key.tab) return 'tab';
  if (key.backspace || key.delete) return 'backspace';
  return null;
}

function characterStroke(character: string): Stroke {
  const named = CONTROL_STROKES[character];
  if (named) return named;
  const code = character.codePointAt(0) ?? 0;
  return code < 0x20 ? `ctrl+${String.fromCharCode(code + 0x60)}` : character;
}

/** True for a stroke that is a character to be typed. */
export function isTyped(stroke: Stroke): boolean {
  return [...stroke].length === 1 && stroke >= ' ';
}
