import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { select } from './db';

export interface SubjectChoice {
  lotId: number | null;
  /** Typed by the person; null: it is looked for in the file name. */
  serial: string | null;
  sourceId: number | null;
}

export interface FrameSubject {
  lotId: number | null;
  unitId: number | null;
  sourceId: number | null;
  /** What the frames list's search finds it by. */
  findText: string;
}

/** What a frame shows: a unit of a lot, or a reference source. Throws before any byte is taken. */
export async function findSubject(fileName: string, choice: SubjectChoice): Promise<FrameSubject> {
  if (choice.sourceId !== null) {
    const [source] = await select<{ name: string }>('SELECT name FROM sources WHERE id = :id', {
      id: choice.sourceId,
    });
    if (!source) throw new AppError('NOT_FOUND', 'There is no such source.');
    return { lotId: null, unitId: null, sourceId: choice.sourceId, findText: source.name };
  }
  if (choice.lotId === null) throw new AppError('BAD_INPUT', 'Choose a lot or a reference source first.');
  const [lot] = await select<{ number: string; closed_at: Date | null }>(
    'SELECT number, closed_at FROM lots WHERE id = :id',
    {
      id: choice.lotId,
    },
  );
  if (!lot) throw new AppError('NOT_FOUND', 'There is no such lot.');
  if (lot.closed_at) throw new AppError('WRONG_STATE', `Lot ${lot.number} is closed.`);
  const unit = choice.serial
    ? await unitBySerial(choice.lotId, lot.number, choice.serial)
    : await unitInName(choice.lotId, lot.number, fileName);
  return { lotId: choice.lotId, unitId: unit.id, sourceId: null, findText: `${unit.serial} ${lot.number}` };
}

interface UnitFound {
  id: number;
  serial: string;
}

async function unitBySerial(lotId: number, lot: string, serial: string): Promise<UnitFound> {
  const [unit] = await select<UnitFound>(
    'SELECT id, serial FROM units WHERE lot_id = :lotId AND serial = :serial',
    { lotId, serial },
  );
  if (!unit)
    throw new AppError(
      'BAD_INPUT',
      `Lot ${lot} has no unit ${serial}. Check the serial, or add the unit to the lot.`,
    );
  return unit;
}

/** The longest serial of the lot that stands alone in the file name, between characters that are neither letters nor digits. */
async function unitInName(lotId: number, lot: string, fileName: string): Promise<UnitFound> {
  const units = await select<UnitFound>(
    `SELECT id, serial FROM units WHERE lot_id = :lotId AND INSTR(:fileName, serial) > 0 ORDER BY CHAR_LENGTH(serial) DESC, id`,
    { lotId, fileName },
  );
  const alone = units.filter(({ serial }) => standsAlone(fileName, serial));
  if (!alone.length) {
    throw new AppError(
      'BAD_INPUT',
      `No unit of lot ${lot} is named in the file name ${fileName}. Type the serial or rename the file.`,
    );
  }
  const [first, second] = alone;
  if (second && second.serial.length === first.serial.length) {
    throw new AppError(
      'BAD_INPUT',
      `The file name ${fileName} names both ${first.serial} and ${second.serial}. Type the serial.`,
    );
  }
  return first;
}

export function standsAlone(fileName: string, serial: string): boolean {
  const name = fileName.toLowerCase();
  const wanted = serial.toLowerCase();
  const isPart = (character: string | undefined) =>
    character !== undefined && /[\p{L}\p{N}]/u.test(character);
  for (let at = name.indexOf(wanted); at >= 0; at = name.indexOf(wanted, at + 1)) {
    if (!isPart(name[at - 1]) && !isPart(name[at + wanted.length])) return true;
  }
  return false;
}
