import { describe, expect, it } from 'vitest';
import { createView, polygonNormal, rotation } from '../../../src/components/plate/projection.ts';
import { drawPlate, type PlateSpec } from '../../../src/components/plate/plate-scene.ts';
import { LARGE_PLATE, MEDIUM_PLATE, SMALL_PLATE } from '../../../src/views/account/sign-in-plate.ts';

const camera = { from: [0, 0, 10] as const, headingDeg: 0, downDeg: 0, focal: 500, centre: [400, 300] as const };

describe('plate projection', () => {
  const view = createView(camera);

  it('puts ahead in the centre, right to the right, up upward', () => {
    expect(view.point([100, 0, 10])).toEqual([400, 300]);
    expect(view.point([100, 10, 10])).toEqual([450, 300]);
    expect(view.point([100, 0, 20])).toEqual([400, 250]);
    expect(view.point([-5, 0, 10])).toBeNull();
  });

  it('has the horizon where far ground points go', () => {
    const tilted = createView({ ...camera, downDeg: 12 });
    expect(tilted.point([1e7, 0, 0])![1]).toBeCloseTo(tilted.horizonY, 2);
  });

  it('cuts what crosses the near plane instead of turning it over', () => {
    const [near, far] = view.segment([-50, 0, 0], [100, 0, 0])!;
    expect(near[1]).toBeGreaterThan(far[1]);
    expect(view.segment([-50, 0, 0], [-10, 0, 0])).toBeNull();
    expect(
      view.polygon([
        [-5, -1, 9],
        [20, -1, 9],
        [20, 1, 9],
        [-5, 1, 9],
      ]),
    ).toHaveLength(4);
  });

  it('turns right for positive heading, nose up for positive pitch, right wing down for positive bank', () => {
    expect(rotation({ headingDeg: 90, pitchDeg: 0, bankDeg: 0 })([1, 0, 0])[1]).toBeCloseTo(1);
    expect(rotation({ headingDeg: 0, pitchDeg: 30, bankDeg: 0 })([1, 0, 0])[2]).toBeCloseTo(0.5);
    expect(rotation({ headingDeg: 0, pitchDeg: 0, bankDeg: 30 })([0, 1, 0])[2]).toBeCloseTo(-0.5);
  });

  it('finds the normal of a polygon whose first corners lie on one line', () => {
    expect(
      polygonNormal([
        [0, 0, 0],
        [1, 0, 0],
        [2, 0, 0],
        [2, 1, 0],
        [0, 1, 0],
      ])[2],
    ).toBeCloseTo(1);
  });
});

describe('plate scene', () => {
  const strokes = (spec: PlateSpec): string[] => drawPlate(spec).shapes.map((shape) => shape.stroke ?? '');

  it('hatches the failed engine and stipples the live one', () => {
    const fills = drawPlate(LARGE_PLATE).shapes.map((shape) => shape.fill);
    expect(fills.filter((fill) => fill === 'url(#h-dead-l)')).toHaveLength(1);
    expect(fills.filter((fill) => fill === 'url(#h-live-l)')).toHaveLength(1);
  });

  it('uses neither signal while every engine runs', () => {
    const running = strokes({ ...LARGE_PLATE, failed: [] });
    expect(running).not.toContain('var(--dead)');
    expect(running).not.toContain('var(--live)');
  });

  it('shows the flight path right of the nose when the wind comes from the right', () => {
    const astern = { ...LARGE_PLATE, sightDeg: 0 };
    const x = (pathRightDeg: number): number => drawPlate({ ...astern, pathRightDeg }).ring![0];
    expect(x(8)).toBeGreaterThan(x(0));
    expect(x(-8)).toBeLessThan(x(0));
  });

  it.each([LARGE_PLATE, MEDIUM_PLATE, SMALL_PLATE])(
    'writes only finite numbers and keeps the labels inside',
    (spec) => {
      const { shapes, labels } = drawPlate(spec);
      expect(shapes.map((shape) => shape.d).join('')).not.toMatch(/NaN|Infinity/);
      for (const label of labels) {
        expect(label.x).toBeGreaterThan(0);
        expect(label.x).toBeLessThan(spec.width);
      }
    },
  );
});
