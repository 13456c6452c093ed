/** The channel as a log: day by day, each entry with its notes beneath. */
import { useEffect, useRef } from 'preact/hooks';
import type { PageChannel, PageMessage } from '../../wire/snapshot.ts';
import { useLooking, zoneOf } from '../context.ts';
import { Entry } from './entry.tsx';

export function Log({ channel }: { channel: PageChannel }) {
  const { snapshot } = useLooking();
  const zone = zoneOf(snapshot);
  const day = new Intl.DateTimeFormat('en-GB', { weekday: 'long', day: 'numeric', month: 'long', timeZone: zone });
  const seen = useRef<{ channel: string; ts: string }>({ channel: '', ts: '' });
  const newest =
    channel.messages
      .map((m) => m.ts)
      .sort()
      .at(-1) ?? '';

  // Notes appear in the middle of the page as well as at its end: bring whatever is new into sight.
  useEffect(() => {
    if (newest === '' || (seen.current.channel === channel.id && newest <= seen.current.ts)) return;
    const arriving = seen.current.channel !== channel.id;
    seen.current = { channel: channel.id, ts: newest };
    if (!arriving) return leafOf(newest)?.scrollIntoView({ block: 'nearest' });
    // Else the browser goes back, after a reload, to where the page was.
    window.history.scrollRestoration = 'manual';
    // Whoever arrives begins where the latest conversation does, not in the middle of it.
    const begun = rootOf(channel, newest);
    if (channel.messages[0]?.ts === begun) window.scrollTo(0, 0);
    else leafOf(begun)?.scrollIntoView({ block: 'start' });
  }, [channel.id, newest]);

  const known = new Set(channel.messages.map((m) => m.ts));
  const under = new Map<string, PageMessage[]>();
  const tops: PageMessage[] = [];
  for (const message of channel.messages) {
    if (message.threadTs !== null && message.threadTs !== message.ts && known.has(message.threadTs)) {
      under.set(message.threadTs, [...(under.get(message.threadTs) ?? []), message]);
    } else tops.push(message);
  }
  let lastDay = '';
  return (
    <div role="log" aria-label={`Entries in ${channel.name}`} class="log">
      <ol>
        {tops.map((message) => {
          const today = day.format(new Date(Number(message.ts) * 1000));
          const turned = today !== lastDay;
          lastDay = today;
          return [
            turned ? (
              <li class="day" key={today}>
                {today}
              </li>
            ) : null,
            <Entry key={message.ts} message={message} replies={under.get(message.ts) ?? []} />,
          ];
        })}
      </ol>
    </div>
  );
}

function leafOf(ts: string): HTMLElement | null {
  return document.getElementById(`at-${ts.replace('.', '-')}`);
}

/** The entry under which a message stands, or itself. */
function rootOf(channel: PageChannel, ts: string): string {
  const under = channel.messages.find((m) => m.ts === ts)?.threadTs ?? ts;
  return channel.messages.some((m) => m.ts === under) ? under : ts;
}
