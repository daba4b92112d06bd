/** Colour maps built in OKLCH (Ottosson 2020, matrices from the publication) with lightness linear in the value. */
export type Rgb = readonly [number, number, number];
export type ColourMap = readonly Rgb[];
export type MapName = 'sequential' | 'diverging';

const gamma = (value: number): number => {
  const v = Math.min(1, Math.max(0, value));
  return Math.round(255 * (v <= 0.0031308 ? 12.92 * v : 1.055 * v ** (1 / 2.4) - 0.055));
};

/** Lightness 0 to 1, chroma, hue in degrees to 8-bit sRGB. */
function oklch(lightness: number, chroma: number, hue: number): Rgb {
  const a = chroma * Math.cos((hue * Math.PI) / 180);
  const b = chroma * Math.sin((hue * Math.PI) / 180);
  const l = (lightness + 0.3963377774 * a + 0.2158037573 * b) ** 3;
  const m = (lightness - 0.1055613458 * a - 0.0638541728 * b) ** 3;
  const s = (lightness - 0.0894841775 * a - 1.291485548 * b) ** 3;
  return [
    gamma(4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s),
    gamma(-1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s),
    gamma(-0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s),
  ];
}

const build = (colour: (t: number) => Rgb): ColourMap => Array.from({ length: 256 }, (_, i) => colour(i / 255));

/** Dark violet, petrol, straw. */
const sequential = build((t) => oklch(0.2 + 0.75 * t, 0.05 + 0.05 * Math.sin(Math.PI * t) + 0.03 * t, 298 - 200 * t ** 0.95));

/** Blue, sheet, rust: the colour of zero is the sheet, so it differs between the themes. */
const divergingLight = build((t) => {
  const u = Math.abs(2 * t - 1);
  return t < 0.5 ? oklch(0.965 - 0.56 * u, 0.145 * u ** 0.8, 252) : oklch(0.965 - 0.52 * u, 0.165 * u ** 0.8, 38);
});
const divergingDark = build((t) => {
  const u = Math.abs(2 * t - 1);
  return t < 0.5 ? oklch(0.235 + 0.55 * u, 0.135 * u ** 0.8, 238) : oklch(0.235 + 0.53 * u, 0.155 * u ** 0.8, 42);
});

export function colourMap(name: MapName, dark: boolean): ColourMap {
  if (name === 'sequential') return sequential;
  return dark ? divergingDark : divergingLight;
}

export const cssColour = ([r, g, b]: Rgb): string => `rgb(${r}, ${g}, ${b})`;

/** The colour of a value on a scale from `low` to `high`. */
export function colourAt(map: ColourMap, value: number, low: number, high: number): Rgb {
  const t = (value - low) / (high - low);
  return map[Math.min(255, Math.max(0, Math.round(t * 255)))] ?? [0, 0, 0];
}

/** CSS gradient of a map. */
export function ramp(map: ColourMap, stops = 16, direction = 'to right'): string {
  const colours = Array.from({ length: stops }, (_, i) => cssColour(map[Math.round((i * 255) / (stops - 1))] ?? [0, 0, 0]));
  return `linear-gradient(${direction}, ${colours.join(', ')})`;
}

/** Puts both ramps on the root as --ramp-seq and --ramp-div and keeps them with the theme. */
export function applyRamps(): void {
  const root = document.documentElement;
  const set = () => {
    const dark = root.dataset.theme === 'dark';
    root.style.setProperty('--ramp-seq', ramp(colourMap('sequential', dark)));
    root.style.setProperty('--ramp-div', ramp(colourMap('diverging', dark), 21));
  };
  set();
  new MutationObserver(set).observe(root, { attributes: true, attributeFilter: ['data-theme'] });
}
