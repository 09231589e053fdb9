import { cssColour, lightLine, lightRgb, linearRgb } from '@/lib/client/light';

/** Relative luminance of an rgb() text (WCAG 2.2). */
function luminance(css: string): number {
  const [r, g, b] = css
    .match(/\d+/g)!
    .map(Number)
    .map((v) => (v / 255 <= 0.04045 ? v / 255 / 12.92 : ((v / 255 + 0.055) / 1.055) ** 2.4));
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

const contrast = (a: number, b: number) => (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05);
const GROUND = { dark: luminance('rgb(19,18,16)'), paper: luminance('rgb(243,240,232)') };
/** One step of an 8-bit channel may be lost in rounding. */
const CONTRAST_SLACK = 0.06;

describe('colour of light', () => {
  // Worked with the published lobes by hand for the design; invented rounding would show here.
  test.each([
    [405, 'rgb(128,0,255)'],
    [450, 'rgb(90,0,255)'],
    [520, 'rgb(0,255,58)'],
    [589, 'rgb(255,132,0)'],
    [635, 'rgb(255,0,5)'],
  ])('%d nm is %s', (nm, css) => expect(cssColour(linearRgb(nm))).toBe(css));

  test('is bone beyond what eyes see, before a fit and with goggles', () => {
    const bone = lightRgb(null, false);
    expect(lightRgb(389, false)).toEqual(bone);
    expect(lightRgb(751, false)).toEqual(bone);
    expect(lightRgb(635, true)).toEqual(bone);
    expect(lightRgb(635, false)).not.toEqual(bone);
  });

  test.each(['dark', 'paper'] as const)('a line of any light stands 4.5:1 on %s', (theme) => {
    for (let nm = 390; nm <= 750; nm += 5) {
      const own = luminance(lightLine(nm, theme, false));
      expect(contrast(own, GROUND[theme])).toBeGreaterThan(4.5 - CONTRAST_SLACK);
    }
  });
});
