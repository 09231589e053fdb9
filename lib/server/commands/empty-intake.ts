import 'server-only';
import { change } from '../db';

/** Clears a person's intake list. The frames stay; they are found under Frames. */
export async function emptyIntake(personId: number): Promise<null> {
  await change('UPDATE frames SET in_intake = FALSE WHERE uploaded_by = :personId AND in_intake', {
    personId,
  });
  return null;
}
