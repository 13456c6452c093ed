// A seeded export of the invented business with as many rows as wanted: one row an account, ISO dates, a steady loss.
import { closeSync, openSync, writeSync } from 'node:fs';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';

const DAY_MS = 86_400_000;
const iso = (day) => new Date(day * DAY_MS).toISOString().slice(0, 10);

export function writeExportRows(path, rows, seed = 7, meanDays = 1400) {
  const generator = xoroshiro128plus(seed);
  const uniform = () => ((generator.next() >>> 0) + 0.5) / 4294967296;
  const file = openSync(path, 'w');
  const first = 19_000;
  const days = 900;
  let text = 'account_id,plan,start_date,end_date,monthly_price\n';
  for (let i = 0; i < rows; i++) {
    const start = first + Math.floor((i * days) / rows);
    const end = start + Math.ceil(-Math.log(uniform()) * meanDays);
    const plan = ['Windowsill', 'Allotment', 'Orchard'][Math.floor(uniform() * 3)];
    text += `mrb-${(i * 7919) % rows},${plan},${iso(start)},${end < first + days ? iso(end) : ''},${(12 + uniform() * 40).toFixed(2)}\n`;
    if (text.length > 1_000_000) {
      writeSync(file, text);
      text = '';
    }
  }
  writeSync(file, text);
  closeSync(file);
}
