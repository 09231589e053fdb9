'use client';

import { useState, useTransition } from 'react';
import type { ActionAnswer } from '@/lib/domain/errors';
import { callAction } from './call-action';

export interface Submit<T> {
  waiting: boolean;
  /** Field name -> sentence. */
  fields: Record<string, string>;
  /** What is wrong with the whole, where no field is to blame. */
  message: string;
  run: (call: () => Promise<ActionAnswer<T>>, onDone: (value: T) => void) => void;
  clear: () => void;
}

const REST = { fields: {} as Record<string, string>, message: '' };

/** A form's way to the server and back: what was typed stays, what is wrong stands beside its field. */
export function useSubmit<T>(): Submit<T> {
  const [waiting, start] = useTransition();
  const [said, setSaid] = useState(REST);
  return {
    waiting,
    ...said,
    run: (call, onDone) =>
      start(async () => {
        const answer = await callAction(call);
        if (answer.ok) {
          setSaid(REST);
          onDone(answer.value);
        } else {
          const fields = answer.fields ?? {};
          setSaid({ fields, message: Object.keys(fields).length ? '' : answer.message });
        }
      }),
    clear: () => setSaid(REST),
  };
}

/** A number as people type it: a comma or a point, thin spaces allowed; NaN when it is none. */
export function parseNumber(text: string): number {
  const plain = text
    .replace(/[\s\u2009\u202f]/g, '')
    .replace('−', '-')
    .replace(',', '.');
  return plain === '' ? Number.NaN : Number(plain);
}

/** As parseNumber, with an empty field meaning that nothing is stated. */
export function parseMaybe(text: string): number | null {
  return text.trim() === '' ? null : parseNumber(text);
}
