import type { ExportChange } from '../../accounts/types.ts';
import { dayInWords } from '../../days.ts';
import { count, counted, listed } from './format.ts';

/** Shares above which a newer export is told to have restated the past in a large way. Our choice, no source. */
const MANY_GONE = 0.05;
const MANY_RESTATED = 0.02;
/** Below this share in common, the two are not two states of one list. */
const SAME_LIST = 0.1;

/** What a newer export changed about what the earlier one said, told before the verdict; empty when nothing did. */
export function changeText(change: ExportChange, name: string): string[] {
  const { before, inBoth, gone, backDated, startMoved, lateLosses, takenBack, asOfBefore } = change;
  if (inBoth < SAME_LIST * before) {
    return [
      `It shares ${inBoth === 0 ? 'no account' : `only ${counted(inBoth, 'account')}`} with ${name}, the export before it, so the two are not compared.`,
    ];
  }
  const parts = [
    gone > 0 && `${counted(gone, 'account')} no longer in it`,
    backDated > 0 && `${counted(backDated, 'account')} added that started before then`,
    startMoved > 0 && `${counted(startMoved, 'start date')} changed`,
    lateLosses > 0 && `${counted(lateLosses, 'loss', 'losses')} booked late`,
    takenBack > 0 && `${counted(takenBack, 'loss', 'losses')} taken back`,
  ].filter((part) => part !== false);
  if (parts.length === 0)
    return [`Up to ${dayInWords(asOfBefore)} it says the same as ${name}, about all ${count(inBoth)} accounts.`];
  const lines = [`Against ${name}, about the time up to ${dayInWords(asOfBefore)}: ${listed(parts)}.`];
  const restated = (lateLosses + takenBack) / before;
  if (gone > MANY_GONE * before || restated > MANY_RESTATED) {
    lines.push(
      `That is a large change of what had been settled: earlier answers rested on other figures. If it is not meant so, drop the right export, and that one is used.`,
    );
  }
  return lines;
}
