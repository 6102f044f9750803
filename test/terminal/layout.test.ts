import { describe, expect, it } from 'vitest';
import { layoutOf, SMALLEST, tooSmall } from '../../src/terminal/layout.ts';

/** Header, strip, axis, readout, heading of the list, footer. */
const FIXED_ROWS = 7;

describe('layoutOf', () => {
  it('shares out every row but the last, and every column, at all sizes', () => {
    for (let columns = 80; columns <= 240; columns += 7) {
      for (let rows = 24; rows <= 80; rows++) {
        for (const cautionsRead of [true, false]) {
          const layout = layoutOf({ columns, rows, cautionsRead });
          const lower = layout.sideBySide ? layout.listRows : layout.listRows + layout.detailRows;
          expect(FIXED_ROWS + layout.cautionRows + layout.plotRows + lower).toBe(rows - 1);
          expect(layout.plotRows).toBeGreaterThanOrEqual(7);
          expect(layout.listRows).toBeGreaterThanOrEqual(4);
          expect(layout.plotWidth).toBeLessThan(columns);
          if (layout.sideBySide) {
            expect(layout.listWidth + layout.detailWidth).toBe(columns);
            expect(layout.detailWidth).toBeGreaterThanOrEqual(48);
          }
        }
      }
    }
  });

  it('keeps the shape of the smallest size below it', () => {
    const small = layoutOf({ columns: 10, rows: 3, cautionsRead: false });
    expect(small).toEqual(layoutOf({ ...SMALLEST, cautionsRead: false }));
    expect(tooSmall({ columns: 79, rows: 24 })).toBe(true);
    expect(tooSmall({ columns: 80, rows: 23 })).toBe(true);
    expect(tooSmall(SMALLEST)).toBe(false);
  });
});
