'use client';

import { useRouter } from 'next/navigation';
import { useEffect } from 'react';
import { frameIsMoving, type FrameState } from '@/lib/domain/life-cycle';

const EVERY_MS = 1500;

/** While the frame is on its way to a reading, looks again; it stops as soon as nothing moves. */
export function StillMoving({ frameId, state }: { frameId: number; state: FrameState }) {
  const router = useRouter();
  const moving = frameIsMoving(state);
  useEffect(() => {
    if (!moving) return undefined;
    const timer = setInterval(() => router.refresh(), EVERY_MS);
    return () => clearInterval(timer);
  }, [moving, frameId, router]);
  return null;
}
