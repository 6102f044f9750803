import { describe, expect, it } from 'vitest';
import { rasterRows } from '../../src/plot/braille.ts';
import {
  cellInk,
  createRaster,
  drawDottedSeries,
  drawHair,
  drawLevel,
  drawSeries,
  lightDot,
  shadeArea,
} from '../../src/plot/raster.ts';
import { runsText } from '../../src/plot/run.ts';
import { cellScale, linearScale } from '../../src/plot/scale.ts';

/** Rows as text of a curve whose x and y are already dots (y upwards). */
function drawn(width: number, height: number, points: readonly (readonly [number, number])[]): string[] {
  const raster = createRaster(width, height);
  drawSeries(
    raster,
    cellScale([0, width * 2 - 1], width),
    linearScale([0, height * 4 - 1], height * 4),
    { x: Float64Array.from(points, (p) => p[0]), y: Float64Array.from(points, (p) => p[1]) },
    'trace',
  );
  return rasterRows(raster).map(runsText);
}

describe('rasterRows', () => {
  it('rasterRows maps each dot of a 1 × 1 cell to its braille bit', () => {
    const glyphs = [];
    for (let column = 0; column < 2; column++) {
      for (let row = 0; row < 4; row++) {
        const raster = createRaster(1, 1);
        lightDot(raster, column, row, 'trace');
        glyphs.push(rasterRows(raster).map(runsText)[0]);
      }
    }
    // Unicode braille: dots 1, 2, 3, 7 down the left column and 4, 5, 6, 8 down the right one.
    expect(glyphs).toEqual(['⠁', '⠂', '⠄', '⡀', '⠈', '⠐', '⠠', '⢀']);
  });

  it('rasterRows leaves an empty cell blank and fills a full one', () => {
    const raster = createRaster(2, 1);
    for (let column = 0; column < 2; column++)
      for (let row = 0; row < 4; row++) lightDot(raster, column, row, 'trace');
    expect(rasterRows(raster).map(runsText)).toEqual(['⣿ ']);
  });

  it('rasterRows takes another set of glyphs', () => {
    const raster = createRaster(2, 1);
    lightDot(raster, 0, 0, 'trace');
    expect(rasterRows(raster, (bits) => (bits === 0 ? '.' : '#')).map(runsText)).toEqual(['#.']);
  });
});

describe('drawSeries', () => {
  it('drawSeries draws a falling diagonal over two cells one dot thick', () => {
    const points = [
      [0, 3],
      [3, 0],
    ] as const;
    expect(drawn(2, 1, points)).toEqual(['⠑⢄']);
  });

  it('drawSeries draws a rising diagonal through 2 × 2 cells', () => {
    // Slope 7/3: rows from the bottom 0–1, 2–3, 4–5, 6–7 in the four columns of dots.
    expect(
      drawn(2, 2, [
        [0, 0],
        [3, 7],
      ]),
    ).toEqual([' ⡜', '⡜ ']);
  });

  it('drawSeries draws a level line in one row of dots', () => {
    expect(
      drawn(2, 1, [
        [0, 2],
        [3, 2],
      ]),
    ).toEqual(['⠒⠒']);
  });

  it('drawSeries keeps a peak that is narrower than a dot at its full height', () => {
    const count = 4001;
    const x = Float64Array.from({ length: count }, (_, i) => (i / (count - 1)) * 19);
    const y = new Float64Array(count);
    y[1234] = 7; // a single sample among about 200 per dot
    const raster = createRaster(10, 2);
    drawSeries(raster, cellScale([0, 19], 10), linearScale([0, 7], 8), { x, y }, 'trace');
    const column = Math.round(x[1234]!);
    for (let row = 0; row < 8; row++) expect(raster.dots[row * 20 + column]).toBe(1);
    expect(raster.dots[column - 1]).toBe(0);
    expect(raster.dots[column + 1]).toBe(0);
  });

  it('drawSeries leaves a gap where a value is not a number', () => {
    const rows = drawn(4, 1, [
      [0, 0],
      [1, 0],
      [3, Number.NaN],
      [6, 0],
      [7, 0],
    ]);
    expect(rows).toEqual(['⣀  ⣀']);
  });

  it('drawSeries joins neighbours of steep lines without holes', () => {
    const points = Array.from({ length: 20 }, (_, i) => [i, (i * 13) % 16] as const);
    const raster = createRaster(10, 4);
    drawSeries(
      raster,
      cellScale([0, 19], 10),
      linearScale([0, 15], 16),
      { x: Float64Array.from(points, (p) => p[0]), y: Float64Array.from(points, (p) => p[1]) },
      'trace',
    );
    const lit = (column: number) =>
      Array.from({ length: 16 }, (_, row) => row).filter((row) => raster.dots[row * 20 + column] === 1);
    for (let column = 1; column < 20; column++) {
      const before = lit(column - 1);
      const here = lit(column);
      expect(here.length).toBeGreaterThan(0);
      expect(here.at(-1)! - here[0]!).toBe(here.length - 1);
      // Eight-connected: the runs of two neighbour columns touch or overlap.
      expect(here[0]!).toBeLessThanOrEqual(before.at(-1)! + 1);
      expect(before[0]!).toBeLessThanOrEqual(here.at(-1)! + 1);
    }
  });

  it('drawSeries clips what leaves the domain, and keeps the part inside', () => {
    expect(
      drawn(2, 1, [
        [0, 0],
        [3, 30],
      ]),
    ).toEqual(['⡇ ']);
    expect(
      drawn(1, 1, [
        [-5, 1],
        [9, 1],
      ]),
    ).toEqual(['⠤']);
  });

  it('drawSeries draws nothing for no samples, and a dot for one', () => {
    expect(drawn(1, 1, [])).toEqual([' ']);
    expect(drawn(1, 1, [[0, 0]])).toEqual(['⡀']);
  });

  it('drawSeries refuses samples of different lengths', () => {
    const raster = createRaster(1, 1);
    const samples = { x: new Float64Array(2), y: new Float64Array(3) };
    expect(() => drawSeries(raster, cellScale([0, 1], 1), linearScale([0, 1], 4), samples, 'trace')).toThrow(
      RangeError,
    );
  });
});

describe('drawLevel', () => {
  it('drawLevel dots a line across', () => {
    const raster = createRaster(4, 1);
    drawLevel(raster, linearScale([0, 3], 4), 3, 'guide');
    expect(rasterRows(raster).map(runsText)).toEqual(['⠁ ⠁ ']);
  });
});

describe('drawDottedSeries', () => {
  it('drawDottedSeries lights one dot in every third column, at the height of the curve', () => {
    const raster = createRaster(4, 1);
    const flat = { x: Float64Array.of(0, 7), y: Float64Array.of(1, 1) };
    drawDottedSeries(raster, cellScale([0, 7], 4), linearScale([0, 3], 4), flat, 'guide');
    expect(rasterRows(raster).map(runsText)).toEqual(['⠄⠠ ⠄']);
  });
});

describe('shadeArea', () => {
  it('shadeArea fills every other column between the curves, and nothing where they are not known', () => {
    const raster = createRaster(4, 1);
    const x = Float64Array.from({ length: 8 }, (_, i) => i);
    const area = { x, low: x.map(() => 0), high: x.map((i) => (i < 4 ? 3 : Number.NaN)) };
    shadeArea(raster, cellScale([0, 7], 4), linearScale([0, 3], 4), area, 'doubt');
    // Column 0: rows 0 and 2; column 2: rows 1 and 3.
    expect(rasterRows(raster).map(runsText)).toEqual(['⠅⡂  ']);
  });
});

describe('drawHair', () => {
  it('drawHair dots a line down at the dot of its value', () => {
    const raster = createRaster(2, 2);
    drawHair(raster, cellScale([0, 3], 2), 1, 'cursor');
    expect(rasterRows(raster).map(runsText)).toEqual(['⠨ ', '⠨ ']);
  });
});

describe('cellInk', () => {
  it('cellInk is the latest ink of a cell, and none where nothing was lit', () => {
    const raster = createRaster(2, 1);
    lightDot(raster, 0, 0, 'baseline');
    lightDot(raster, 1, 3, 'trace');
    expect(cellInk(raster, 0, 0)).toBe('trace');
    expect(cellInk(raster, 1, 0)).toBeNull();
  });
});

describe('createRaster', () => {
  it('createRaster refuses a size without cells', () => {
    expect(() => createRaster(0, 3)).toThrow(RangeError);
  });
});
