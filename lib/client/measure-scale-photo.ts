import type { ScaleKind, ScaleReading } from '@/lib/domain/scale-result';

export type ScalePhotoAnswer = { ok: true; reading: ScaleReading } | { ok: false; message: string };

/** Sends a picture of a scale and answers the pixel scale, or a sentence. */
export async function measureScalePhoto(
  file: File,
  kind: ScaleKind,
  pitchMm: number,
  pitchPercent: number,
): Promise<ScalePhotoAnswer> {
  const query = new URLSearchParams({ kind, pitchMm: String(pitchMm), pitchPercent: String(pitchPercent) });
  try {
    const response = await fetch(`/api/scale?${query}`, {
      method: 'POST',
      body: file,
      headers: { 'content-type': 'application/octet-stream' },
    });
    const body = (await response.json()) as ScaleReading & {
      title?: string;
      fields?: Record<string, string>;
    };
    if (response.ok) return { ok: true, reading: body };
    return {
      ok: false,
      message:
        Object.values(body.fields ?? {})[0] ?? body.title ?? 'The service did not answer as it should.',
    };
  } catch (problem) {
    if (!(problem instanceof TypeError || problem instanceof SyntaxError)) throw problem;
    return {
      ok: false,
      message: 'The service could not be reached. Choose the picture again when the network is back.',
    };
  }
}
