import { cleanup, fireEvent, render, screen } from '@testing-library/react';
import { afterEach, describe, expect, it } from 'vitest';
import { BodyImage, type Place } from '../../../app/components/images/body-image';
import { bodyHalfSize, bodyReach } from '../../../app/components/images/body-outline';
import { electrodeLayout, problemElectrodes } from '../../../app/components/images/electrode-layout';
import { cutThrough, insidePixels, largest, toPicture, type PixelGrid } from '../../../app/components/images/pixels';
import type { Body } from '../../../shared/domain/body';
import { evaluationGrid } from '../../../solvers/core/grid';

afterEach(cleanup);

const star: Body = { kind: 'star', radius: 0.1, cosine: [0, 0.2], sine: [] };
const rectangle: Body = { kind: 'rectangle', width: 0.2, height: 0.1 };
const interval: Body = { kind: 'interval', from: -6, to: 6 };
const gridOf = (body: Body, nx: number, ny: number): PixelGrid => {
  const [a, b] = bodyHalfSize(body);
  return body.kind === 'interval' ? { nx, ny: 1, xMin: body.from, xMax: body.to, yMin: 0, yMax: 1, bodyRadius: a, body } : { nx, ny, xMin: -a, xMax: a, yMin: -b, yMax: b, bodyRadius: Math.max(a, b), body };
};

describe('bodies of pictures', () => {
  it('reach as far as their curve says', () => {
    expect(bodyReach(star, 0)).toBeCloseTo(0.12, 12);
    expect(bodyReach(star, Math.PI / 2)).toBeCloseTo(0.08, 12);
    expect(bodyReach(rectangle, 0)).toBeCloseTo(0.1, 12);
    // The diagonal of a rectangle of 2 by 1 is sqrt(5) / 2 of its width.
    expect(bodyReach(rectangle, Math.atan2(1, 2))).toBeCloseTo((0.1 * Math.sqrt(5)) / 2, 12);
  });

  it('hold the pixels that the evaluation grid holds, also where an older grid names no body', () => {
    for (const body of [star, rectangle, interval] as const) {
      const grid = gridOf(body, 16, 16);
      expect([...insidePixels(grid)]).toEqual([...evaluationGrid({ ...grid, body }).inside]);
    }
    const disc = { nx: 12, ny: 12, xMin: -1, xMax: 1, yMin: -1, yMax: 1, bodyRadius: 1 };
    expect([...insidePixels(disc)]).toEqual([...evaluationGrid({ ...disc, body: { kind: 'disc', radius: 1 } }).inside]);
  });

  it('are cut from edge to edge through the centre', () => {
    const grid = gridOf(rectangle, 8, 4);
    const cut = cutThrough(toPicture(new Float64Array(32).fill(3), grid), Math.PI / 2, 5);
    // Rounding of the steps only.
    [-0.05, -0.025, 0, 0.025, 0.05].forEach((at, i) => expect(cut[i]?.position).toBeCloseTo(at, 12));
    expect(cut.every((p) => p.value === 3)).toBe(true);
  });

  it('give a curve all its values, and the place of its largest one', () => {
    const grid = gridOf(interval, 4, 1);
    const picture = toPicture([0, 1, -5, 2], grid);
    expect(cutThrough(picture, 1).map((p) => [p.position, p.value])).toEqual([[-4.5, 0], [-1.5, 1], [1.5, -5], [4.5, 2]]);
    expect(largest(picture)).toEqual({ value: 5, x: 1.5, y: 0.5 });
  });
});

describe('electrodes', () => {
  const geometry = { body: { kind: 'disc' as const, radius: 0.15 }, electrodes: 8, electrodeCoverage: 0.5, firstElectrodeDeg: 90, numbering: 'clockwise' as const };
  it('stand where they are numbered on a disc', () => {
    const { arcs } = electrodeLayout(geometry);
    expect(arcs.map(({ centre }) => Math.round((centre * 180) / Math.PI))).toEqual([90, 45, 0, -45, -90, -135, -180, -225]);
    expect((arcs[0]!.to - arcs[0]!.from) / (Math.PI / 4)).toBeCloseTo(0.5, 9);
  });
  it('are equally wide along a curve, so that their angles are not', () => {
    const angles = electrodeLayout({ ...geometry, body: star }).arcs.map(({ from, to }) => to - from);
    expect(Math.max(...angles) / Math.min(...angles)).toBeGreaterThan(1.2);
  });
  it('belong to electrical impedance alone', () => {
    expect(problemElectrodes({ family: 'deblurring', geometry: { body: rectangle, pointSpread: 'disc', spread: 0.01, cells: 20, edge: 'zero' } })).toBeNull();
  });
});

describe('the image of a body', () => {
  const place: { now: Place | null } = { now: null };
  const onCross = (p: Place) => {
    place.now = p;
  };
  it('has the shape of its body and keeps the mark inside', () => {
    const grid = gridOf(rectangle, 8, 4);
    render(<BodyImage label="Blurred" picture={toPicture(new Float64Array(32), grid)} low={0} high={1} cross={{ x: 0.09, y: 0 }} onCross={onCross} crossStep={0.02} />);
    const image = screen.getByRole('img', { name: /^Blurred/ });
    // 100 by 50 drawing units and a margin of 3.
    expect(image.style.aspectRatio).toBe('103.000 / 53.000');
    fireEvent.keyDown(image, { key: 'ArrowRight' });
    expect(place.now?.x).toBeCloseTo(0.098, 9);
  });
  it('is a curve on an interval, with the truth dashed behind it and a mark that moves along x', () => {
    const grid = gridOf(interval, 6, 1);
    const { container } = render(<BodyImage label="Solution" picture={toPicture([0, 1, 2, 3, 4, 5], grid)} under={toPicture([0, 1, 1, 1, 1, 0], grid)} low={0} high={5} cross={{ x: 5.95, y: 0.5 }} onCross={onCross} crossStep={0.1} />);
    expect(container.querySelector('canvas')).toBeNull();
    expect([...container.querySelectorAll('path')].some((p) => p.getAttribute('stroke-dasharray') === '5 3')).toBe(true);
    fireEvent.keyDown(screen.getByRole('img', { name: /^Solution/ }), { key: 'ArrowRight' });
    expect(place.now).toEqual({ x: 6, y: 0.5 });
  });
  it('shows the outline while there is no picture', () => {
    const { container } = render(<BodyImage label="Waiting" picture={null} body={star} low={0} high={1} />);
    expect(container.querySelector('path')?.getAttribute('stroke-dasharray')).toBe('3 3');
  });
});
