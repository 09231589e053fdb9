import sharp from 'sharp';
import { turnUpright } from '@/lib/imaging/orientation';

/** Orientation codes: Exif 2.32, 4.6.4, tag 274. The reference is the image library's own upright pictures. */
describe('turning a channel upright', () => {
  const widthPx = 70;
  const heightPx = 45;
  const stored = Uint8Array.from(
    { length: widthPx * heightPx },
    (_, i) => (i * 37 + Math.floor(i / 7)) % 251,
  );

  test.each([1, 2, 3, 4, 5, 6, 7, 8])('orientation %i as the image library turns it', async (orientation) => {
    const file = await sharp(stored, { raw: { width: widthPx, height: heightPx, channels: 1 } })
      .withMetadata({ orientation })
      .tiff({ compression: 'none' })
      .toBuffer();
    const { data, info } = await sharp(file)
      .autoOrient()
      .extractChannel(0)
      .raw()
      .toBuffer({ resolveWithObject: true });
    expect(info.width).toBe(orientation >= 5 ? heightPx : widthPx);
    const turned = turnUpright(Uint8Array.from(stored), widthPx, heightPx, orientation);
    expect(Buffer.compare(Buffer.from(turned), data)).toBe(0);
  });

  test('keeps 16 bit samples whole', () => {
    const turned = turnUpright(Uint16Array.from([1, 2, 3, 40_000, 50_000, 60_000]), 3, 2, 6);
    expect([...turned]).toEqual([40_000, 1, 50_000, 2, 60_000, 3]);
  });
});
