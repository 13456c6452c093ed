import { holdFolder } from '../../../src/store/folderLock.ts';

/* Tries to hold the folder named by the argument; prints "held" or "refused <code>", and stays until it is killed. */
process.stdin.resume();
try {
  await holdFolder(process.argv[2]!);
  console.log('held');
} catch (error) {
  console.log(`refused ${(error as { code?: string }).code}`);
}
