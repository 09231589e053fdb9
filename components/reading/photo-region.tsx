'use client';

import Image from 'next/image';
import { useState } from 'react';
import { RegionCalliper } from '@/components/figures/region-calliper';
import type { Picture } from '@/lib/client/region';
import { useSize } from '@/lib/client/use-size';
import type { Region } from '@/lib/domain/reading-result';

interface Props {
  frameId: number;
  picture: Picture;
  /** Heard text of the photo. */
  alt: string;
  region: Region | null;
  onChange?: (region: Region) => void;
}

/** The photo as received, with the calliper on it. */
export function PhotoRegion({ frameId, picture, alt, region, onChange }: Props) {
  const [measure, size] = useSize<HTMLDivElement>();
  const [lost, setLost] = useState(false);
  return (
    <div className="shot" ref={measure} style={{ aspectRatio: `${picture.widthPx} / ${picture.heightPx}` }}>
      {lost ? (
        <p className="p-4 text-small text-[#c3bcaf]">
          The photo could not be loaded. The numbers below still move the region.
        </p>
      ) : (
        // The server has already made this preview, and it is private: it is shown as it comes.
        <Image
          unoptimized
          priority
          src={`/api/frames/${frameId}/photo`}
          width={picture.widthPx}
          height={picture.heightPx}
          alt={alt}
          onError={() => setLost(true)}
        />
      )}
      {size && region ? (
        <RegionCalliper
          region={region}
          picture={picture}
          zoom={size.width / picture.widthPx}
          width={size.width}
          height={size.height}
          onChange={onChange}
        />
      ) : null}
    </div>
  );
}
