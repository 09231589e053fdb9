'use client';

import Link from 'next/link';
import { Mark } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { Select } from '@/components/ui/field';
import { dueOf } from '@/lib/domain/due';
import type { PlateView } from '@/lib/domain/views';

interface Props {
  plates: PlateView[];
  benchId: number;
  chosen: PlateView | undefined;
  error?: string;
  onChoose: (plateId: number) => void;
}

function whereText(plate: PlateView, benchId: number): string {
  if (!plate.mountedOn) return 'on no bench';
  return plate.mountedOn.bench.id === benchId ? 'on this bench' : `on ${plate.mountedOn.bench.name}`;
}

/** Which slit plate the setup is for; separation and width are the newest its certificates state. */
export function PlateChoice({ plates, benchId, chosen, error, onChoose }: Props) {
  const certificate = chosen?.certificates[0];
  const due = certificate ? dueOf(certificate.due, new Date()) : null;
  const elsewhere =
    chosen?.mountedOn && chosen.mountedOn.bench.id !== benchId ? chosen.mountedOn.bench : null;
  return (
    <div className="plain-block" role="group" aria-label="Slit plate">
      <div>
        <Select
          label="Slit plate"
          value={chosen ? String(chosen.id) : ''}
          error={error}
          onChange={(event) => onChoose(Number(event.target.value))}
        >
          {chosen ? null : <option value="">Choose the plate</option>}
          {plates.map((plate) => (
            <option key={plate.id} value={plate.id}>
              {plate.name}, {whereText(plate, benchId)}
            </option>
          ))}
        </Select>
        <p className="help">
          Another plate, or a new certificate, is entered under{' '}
          <Link className="link" href="/benches/plates">
            Plates
          </Link>
          .
        </p>
      </div>
      {certificate && due ? (
        <div className="wide grid gap-1 text-small text-ink-2">
          <p>
            Slit separation d{' '}
            <Quantity
              value={certificate.separationUm.value}
              expanded={2 * certificate.separationUm.u}
              unit="µm"
              size="cell"
            />
            , slit width w{' '}
            <Quantity
              value={certificate.widthUm.value}
              expanded={2 * certificate.widthUm.u}
              unit="µm"
              size="cell"
            />
            , k = 2
          </p>
          <p>
            {certificate.certificate || 'No certificate is named'}. {due.text}.
          </p>
          {elsewhere ? (
            <p className="flex items-center gap-2.5 text-ink">
              <Mark kind="check-look" /> It is on {elsewhere.name}. It has to be taken off there before this
              setup is approved.
            </p>
          ) : null}
        </div>
      ) : null}
    </div>
  );
}
