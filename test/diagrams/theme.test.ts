import { describe, expect, it } from 'vitest';
import { drawnAlike, PALETTE, translucent } from '../../kernel-lib/diagrams/theme';

type Rgb = [number, number, number];

function linear(hex: string): Rgb {
  return [1, 3, 5].map((i) => {
    const c = Number.parseInt(hex.slice(i, i + 2), 16) / 255;
    return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
  }) as Rgb;
}

const times = (m: number[][], v: Rgb) => m.map((row) => row[0] * v[0] + row[1] * v[1] + row[2] * v[2]) as Rgb;

/** Perceptual coordinates. Source: B. Ottosson 2020, OKLab, public domain; matrices as published there. */
function oklab(rgb: Rgb): Rgb {
  const lms = times(
    [
      [0.4122214708, 0.5363325363, 0.0514459929],
      [0.2119034982, 0.6806995451, 0.1073969566],
      [0.0883024619, 0.2817188376, 0.6299787005],
    ],
    rgb.map((c) => Math.max(0, c)) as Rgb,
  ).map(Math.cbrt) as Rgb;
  return times(
    [
      [0.2104542553, 0.793617785, -0.0040720468],
      [1.9779984951, -2.428592205, 0.4505937099],
      [0.0259040371, 0.7827717662, -0.808675766],
    ],
    lms,
  );
}

/** Full colour blindness. Source: Machado, Oliveira & Fernandes 2009, IEEE TVCG 15, 1291, severity 1 (from memory). */
const EYES: Record<string, number[][]> = {
  usual: [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ],
  protanopia: [
    [0.152286, 1.052583, -0.204868],
    [0.114503, 0.786281, 0.099216],
    [-0.003882, -0.048116, 1.051998],
  ],
  deuteranopia: [
    [0.367322, 0.860646, -0.227968],
    [0.280085, 0.672501, 0.047413],
    [-0.01182, 0.04294, 0.968881],
  ],
  tritanopia: [
    [1.255528, -0.076749, -0.178779],
    [-0.078411, 0.930809, 0.147602],
    [0.004733, 0.691367, 0.3039],
  ],
};

describe('palette', () => {
  it.each(Object.keys(EYES))('keeps every two hues apart for %s eyes', (eye) => {
    // 0.02 is about the least difference seen side by side; 0.08 is four times that. Slate, the grey, goes with its own symbols.
    const hues = Object.entries(PALETTE).filter(([name]) => name !== 'slate');
    for (const [a, first] of hues) {
      for (const [b, second] of hues) {
        if (a >= b) continue;
        const [p, q] = [first, second].map((hex) => oklab(times(EYES[eye], linear(hex))));
        expect([a, b, Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]) > 0.08]).toEqual([a, b, true]);
      }
    }
  });

  it('reads on white and on near black', () => {
    const luminance = (hex: string) => times([[0.2126, 0.7152, 0.0722]], linear(hex))[0];
    for (const hex of Object.values(PALETTE)) {
      expect(1.05 / (luminance(hex) + 0.05)).toBeGreaterThan(2.9);
      expect((luminance(hex) + 0.05) / (luminance('#111111') + 0.05)).toBeGreaterThan(2.9);
    }
  });

  it('writes a colour with an opacity', () => {
    expect(translucent('#246ee5', 0.5)).toBe('rgba(36,110,229,0.5)');
  });

  it('draws all markers of a figure by one means', () => {
    const mixed = [{ type: 'scattergl' }, { type: 'scatter' }, { type: 'bar' }];
    expect(drawnAlike(mixed).map((t) => t.type)).toEqual(['scattergl', 'scattergl', 'bar']);
    expect(drawnAlike(mixed.slice(1)).map((t) => t.type)).toEqual(['scatter', 'bar']);
  });
});
