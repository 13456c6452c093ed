/** Checking a message's or view's blocks the way the service does before it takes them. */
import { z } from 'zod';
import { type Block, blockSchema, type SlackFileRef } from './blocks.ts';
import { LIMITS } from './limits.ts';
import { issueMessages, Refusal } from './refusal.ts';
import { type ViewInput, viewSchema } from './views.ts';

/** Says whether a `slack_file` may be shown: the file exists, is an image of an accepted kind, and has been processed. */
export type FileCheck = (ref: SlackFileRef) => boolean;

const messageBlocks = z.array(blockSchema).max(LIMITS.messageBlocks);

/** @throws Refusal `invalid_blocks`, `only_one_table_allowed` or `msg_blocks_too_long`, with JSON pointers */
export function checkMessageBlocks(value: unknown, fileIsShowable: FileCheck): Block[] {
  const parsed = messageBlocks.safeParse(value, { reportInput: true });
  if (!parsed.success) throw new Refusal('invalid_blocks', issueMessages(parsed.error.issues, ['blocks']));
  const blocks = parsed.data;
  crossChecks(blocks, ['blocks'], fileIsShowable, 'message');
  if (blocks.filter((b) => b.type === 'table').length > 1) {
    throw new Refusal('invalid_blocks', [
      '[ERROR] only_one_table_allowed',
      `[ERROR] only one table is allowed [json-pointer:/blocks/${blocks.findLastIndex((b) => b.type === 'table')}]`,
    ]);
  }
  if (textLength(blocks) > LIMITS.blockTextTotal) {
    throw new Refusal('msg_blocks_too_long', [
      `[ERROR] the text of all blocks is longer than ${LIMITS.blockTextTotal}`,
    ]);
  }
  return blocks;
}

/** @throws Refusal `invalid_arguments`, `invalid_blocks` or `view_too_large`, with JSON pointers */
export function checkView(value: unknown, fileIsShowable: FileCheck): ViewInput {
  if (Buffer.byteLength(JSON.stringify(value ?? null)) > LIMITS.viewBytes) throw new Refusal('view_too_large');
  const parsed = viewSchema.safeParse(value, { reportInput: true });
  if (!parsed.success) throw new Refusal('invalid_arguments', issueMessages(parsed.error.issues, ['view']));
  crossChecks(parsed.data.blocks, ['view', 'blocks'], fileIsShowable, 'view', 'invalid_arguments');
  return parsed.data;
}

function crossChecks(
  blocks: readonly Block[],
  root: readonly string[],
  fileIsShowable: FileCheck,
  place: 'message' | 'view',
  code = 'invalid_blocks',
): void {
  const problems: string[] = [];
  const at = (index: number, rest: string) => `[json-pointer:/${root.join('/')}/${index}${rest}]`;
  const blockIds = new Set<string>();
  let markdown = 0;
  blocks.forEach((block, index) => {
    if (block.block_id !== undefined) {
      if (blockIds.has(block.block_id)) {
        problems.push(`[ERROR] \`block_id\` ${block.block_id} already exists ${at(index, '/block_id')}`);
      }
      blockIds.add(block.block_id);
    }
    const actionIds = new Set<string>();
    for (const element of interactiveElements(block)) {
      if (element.action_id === undefined) continue;
      if (actionIds.has(element.action_id)) {
        problems.push(`[ERROR] \`action_id\` ${element.action_id} already exists ${at(index, '')}`);
      }
      actionIds.add(element.action_id);
    }
    if (block.type === 'markdown') markdown += block.text.length;
    if (block.type === 'table' && tableText(block.rows) > LIMITS.tableText) {
      problems.push(`[ERROR] the table's text must be less than ${LIMITS.tableText + 1} characters ${at(index, '')}`);
    }
    if (place === 'message' && block.type === 'input' && block.element.type === 'file_input') {
      problems.push(`[ERROR] file_input is only supported in modals ${at(index, '/element')}`);
    }
    for (const { ref, path } of slackFiles(block)) {
      if (!fileIsShowable(ref)) problems.push(`[ERROR] invalid slack file ${at(index, path)}`);
    }
  });
  if (markdown > LIMITS.markdownText) {
    problems.push(`[ERROR] markdown text must be less than ${LIMITS.markdownText + 1} characters in all`);
  }
  if (problems.length > 0) throw new Refusal(code, problems);
}

/** Every element of a block that a person can operate. */
export function interactiveElements(block: Block) {
  if (block.type === 'actions') return block.elements;
  if (block.type === 'input') return [block.element];
  if (block.type === 'section' && block.accessory && block.accessory.type !== 'image') return [block.accessory];
  return [];
}

function slackFiles(block: Block): { ref: SlackFileRef; path: string }[] {
  if (block.type === 'image') return block.slack_file ? [{ ref: block.slack_file, path: '/slack_file' }] : [];
  if (block.type === 'section' && block.accessory?.type === 'image' && block.accessory.slack_file) {
    return [{ ref: block.accessory.slack_file, path: '/accessory/slack_file' }];
  }
  if (block.type === 'context') {
    return block.elements.flatMap((element, i) =>
      element.type === 'image' && element.slack_file
        ? [{ ref: element.slack_file, path: `/elements/${i}/slack_file` }]
        : [],
    );
  }
  return [];
}

function tableText(value: unknown): number {
  return textLength(value);
}

/** Characters of all `text` strings, however deep. */
export function textLength(value: unknown): number {
  if (Array.isArray(value)) return value.reduce<number>((sum, item) => sum + textLength(item), 0);
  if (value === null || typeof value !== 'object') return 0;
  return Object.entries(value).reduce(
    (sum, [key, item]) => sum + (key === 'text' && typeof item === 'string' ? item.length : textLength(item)),
    0,
  );
}
