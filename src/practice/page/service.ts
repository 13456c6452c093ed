/** Talking to the practice service: requests one after another, uploads, and the live stream of snapshots. */
import { useEffect, useState } from 'preact/hooks';
import type { PageRequest } from '../desk/requests.ts';
import type { PageSnapshot } from '../wire/snapshot.ts';

const HEADER = { 'x-practice-page': '1' };
let queue: Promise<unknown> = Promise.resolve();

async function post(path: string, body: BodyInit, type: string): Promise<Record<string, unknown>> {
  const response = await fetch(path, { method: 'POST', body, headers: { ...HEADER, 'content-type': type } });
  const answer = (await response.json()) as Record<string, unknown>;
  if (!response.ok) throw new Error(String(answer.problem ?? response.status));
  return answer;
}

/** In order: a form's values must have arrived before the form is handed in. */
export function ask(request: PageRequest): Promise<Record<string, unknown>> {
  const next = queue.then(() => post('/page/do', JSON.stringify(request), 'application/json'));
  queue = next.catch(() => undefined);
  return next;
}

/** @returns the file's id */
export async function upload(as: string, file: File): Promise<string> {
  const query = new URLSearchParams({ as, name: file.name });
  const answer = await post(`/page/upload?${query}`, file, 'application/octet-stream');
  return String(answer.file);
}

/** @returns also the form that was open already when this visit began */
export function useSnapshot(as: string): {
  snapshot: PageSnapshot | undefined;
  connected: boolean;
  leftOpen: string | undefined;
} {
  const [snapshot, setSnapshot] = useState<PageSnapshot>();
  const [connected, setConnected] = useState(false);
  const [leftOpen, setLeftOpen] = useState<string>();
  useEffect(() => {
    const source = new EventSource(`/page/stream?as=${encodeURIComponent(as)}`);
    let first = true;
    source.onmessage = (event: MessageEvent<string>) => {
      const news = JSON.parse(event.data) as PageSnapshot;
      if (first) setLeftOpen(news.modal?.id);
      first = false;
      setSnapshot(news);
      setConnected(true);
    };
    source.onerror = () => setConnected(false);
    return () => source.close();
  }, [as]);
  return { snapshot, connected, leftOpen };
}
