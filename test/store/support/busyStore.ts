import { openStore } from '../../../src/store/openStore.ts';

/*
 * A process to be killed: opens the store, keeps a dataset and an entry, and works on that entry for ever.
 * Arguments: data folder, database URL or empty, event key. Prints "working <event key> <dataset id>" when it does.
 */
const [dataFolder = '', databaseUrl = '', eventKey = ''] = process.argv.slice(2);
const store = await openStore({
  dataFolder,
  now: () => Date.now(),
  ...(databaseUrl ? { databaseUrl } : {}),
  queue: { beatMs: 100, expireSeconds: 1 },
});
const workspace = await store.workspace('T-marrowby');
const { REPORT } = await import('./samples.ts');
const kept = await workspace.saveDataset(
  { channelId: 'C-seeds', name: 'parcels.csv', fileId: 'F1', uploadedBy: 'U-wren', choices: {}, report: REPORT },
  new Uint8Array(5_000_000).fill(7),
);
await store.work((entry) => {
  console.log(`working ${entry.eventKey} ${kept.id}`);
  return new Promise(() => undefined);
}, 1);
await store.receive({ eventKey, naturalKey: eventKey, teamId: 'T-marrowby', kind: 'mention', payload: {} });
