import { notFound } from 'next/navigation';

/** An address of no page, under the bar of the room. */
export default function Nowhere() {
  notFound();
}
