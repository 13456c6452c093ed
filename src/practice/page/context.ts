/** What every part of the page needs to know: who is looking, and what they see. */
import { createContext } from 'preact';
import { useContext } from 'preact/hooks';
import type { PageFile, PageSnapshot } from '../wire/snapshot.ts';
import type { Confirm } from '../wire/text.ts';

export interface Looking {
  readonly snapshot: PageSnapshot;
  /** shows a problem at the foot of the page */
  readonly complain: (problem: unknown) => void;
  readonly enlarge: (picture: { url: string; alt: string; title: string }) => void;
  readonly confirm: (question: Confirm | undefined) => Promise<boolean>;
}

export const LookingContext = createContext<Looking | undefined>(undefined);

export function useLooking(): Looking {
  const looking = useContext(LookingContext);
  if (!looking) throw new Error('a part of the page was drawn outside it');
  return looking;
}

export function nameOf(snapshot: PageSnapshot, id: string): string {
  return snapshot.people.find((p) => p.id === id)?.name ?? id;
}

export function zoneOf(snapshot: PageSnapshot): string {
  return snapshot.people.find((p) => p.id === snapshot.me)?.timeZone ?? 'UTC';
}

export function sizeOf(file: PageFile): string {
  if (file.size < 1000) return `${file.size} bytes`;
  if (file.size < 1_000_000) return `${(file.size / 1000).toFixed(0)} kB`;
  return `${(file.size / 1_000_000).toFixed(1)} MB`;
}
