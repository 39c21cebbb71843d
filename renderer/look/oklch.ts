/** sRGB as three numbers 0 to 255. */
export type Rgb = readonly [number, number, number];

const toByte = (linear: number): number => {
  const clipped = Math.min(1, Math.max(0, linear));
  const encoded = clipped <= 0.0031308 ? 12.92 * clipped : 1.055 * clipped ** (1 / 2.4) - 0.055;
  return Math.round(255 * encoded);
};

/**
 * OKLCH to sRGB, clipped per channel.
 * @param lightness 0 to 1
 * @param chroma 0 to about 0.37
 * @param hue degrees
 * Matrices: B. Ottosson, "A perceptual color space for image processing" (2020).
 */
export function oklch(lightness: number, chroma: number, hue: number): Rgb {
  const angle = (hue * Math.PI) / 180;
  const a = chroma * Math.cos(angle);
  const b = chroma * Math.sin(angle);
  const l = (lightness + 0.3963377774 * a + 0.2158037573 * b) ** 3;
  const m = (lightness - 0.1055613458 * a - 0.0638541728 * b) ** 3;
  const s = (lightness - 0.0894841775 * a - 1.291485548 * b) ** 3;
  return [
    toByte(4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s),
    toByte(-1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s),
    toByte(-0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s),
  ];
}

export const hex = (rgb: Rgb): string =>
  `#${rgb.map((value) => value.toString(16).padStart(2, '0')).join('')}`;

export function parseHex(text: string): Rgb {
  const value = Number.parseInt(text.slice(1), 16);
  return [value >> 16, (value >> 8) & 255, value & 255];
}

/** Relative luminance of WCAG 2.2, 0 to 1. */
export function luminance([r, g, b]: Rgb): number {
  const linear = (byte: number): number => {
    const value = byte / 255;
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
  };
  return 0.2126 * linear(r) + 0.7152 * linear(g) + 0.0722 * linear(b);
}

/** Contrast ratio of WCAG 2.2, 1 to 21. */
export function contrast(first: Rgb, second: Rgb): number {
  const a = luminance(first);
  const b = luminance(second);
  return (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05);
}
