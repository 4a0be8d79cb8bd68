/**
 * OKLCH to sRGB and WCAG contrast, for checking the colour tokens.
 *
 * Source of the conversion: CSS Color Module Level 4, section 9.2 "OKLab" and its sample code
 * (OKLab to linear-light sRGB matrices by Björn Ottosson). Source of the contrast: WCAG 2.2, definitions of
 * "relative luminance" and "contrast ratio".
 */

export type Oklch = { lightness: number; chroma: number; hue: number };

/** Reads `oklch(0.42 0.078 215)`; throws when the text is in another notation. */
export function parseOklch(text: string): Oklch {
  const match = /^oklch\(\s*([\d.]+)\s+([\d.]+)\s+([\d.]+)\s*\)$/.exec(text.trim());
  if (!match) throw new Error(`Not an oklch(lightness chroma hue) colour: ${text}`);
  return { lightness: Number(match[1]), chroma: Number(match[2]), hue: Number(match[3]) };
}

/** Linear-light sRGB, not yet clipped: a channel outside 0 to 1 means the colour is outside the sRGB gamut. */
export function toLinearSrgb({ lightness, chroma, hue }: Oklch): [number, number, number] {
  const angle = (hue * Math.PI) / 180;
  const a = chroma * Math.cos(angle);
  const b = chroma * Math.sin(angle);
  const l = (lightness + 0.3963377774 * a + 0.2158037573 * b) ** 3;
  const m = (lightness - 0.1055613458 * a - 0.0638541728 * b) ** 3;
  const s = (lightness - 0.0894841775 * a - 1.291485548 * b) ** 3;
  return [
    4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s,
    -1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s,
    -0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s,
  ];
}

/** Relative luminance, 0 (black) to 1 (white), after clipping to the gamut as a screen would. */
export function luminance(colour: Oklch): number {
  const [red, green, blue] = toLinearSrgb(colour).map((channel) => Math.min(1, Math.max(0, channel)));
  return 0.2126 * (red ?? 0) + 0.7152 * (green ?? 0) + 0.0722 * (blue ?? 0);
}

/** WCAG contrast ratio, 1 to 21. */
export function contrast(one: Oklch, other: Oklch): number {
  const [darker = 0, lighter = 0] = [luminance(one), luminance(other)].sort((a, b) => a - b);
  return (lighter + 0.05) / (darker + 0.05);
}

/** The colour as `#rrggbb`, for comparing with published hexadecimal values. */
export function toHex(colour: Oklch): string {
  const bytes = toLinearSrgb(colour).map((channel) => {
    const clipped = Math.min(1, Math.max(0, channel));
    const encoded = clipped <= 0.0031308 ? 12.92 * clipped : 1.055 * clipped ** (1 / 2.4) - 0.055;
    return Math.round(encoded * 255);
  });
  return `#${bytes.map((byte) => byte.toString(16).padStart(2, "0")).join("")}`;
}
