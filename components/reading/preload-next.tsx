'use client';

import { useRouter } from 'next/navigation';
import { useEffect } from 'react';

/** Fetches the page and the photo of the next reading while this one is looked at. */
export function PreloadNext({ href, frameId }: { href: string; frameId: number }) {
  const router = useRouter();
  useEffect(() => {
    router.prefetch(href);
    const photo = new Image();
    photo.src = `/api/frames/${frameId}/photo`;
  }, [router, href, frameId]);
  return null;
}
