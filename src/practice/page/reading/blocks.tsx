/** Drawing blocks, in messages, modals and the Home tab alike. */
import type { Block, ImageElement, TableBlock, TableCell } from '../../wire/blocks.ts';
import type { InteractiveElement } from '../../wire/elements.ts';
import type { ElementValues } from '../../wire/objects.ts';
import { useLooking } from '../context.ts';
import { Control, type Place } from '../operating/control.tsx';
import { Field } from '../operating/field.tsx';
import { Picture } from './picture.tsx';
import { Markup, RichTextView, TextObject } from './text.tsx';

export interface BlocksProps {
  readonly blocks: readonly Block[];
  readonly place: Place;
  readonly state: ElementValues;
  /** block_id to what is wrong there */
  readonly errors?: Readonly<Record<string, string>>;
}

export function Blocks(props: BlocksProps) {
  return (
    <div class="blocks">
      {props.blocks.map((block, i) => (
        <BlockView key={block.block_id ?? i} block={block} {...props} />
      ))}
    </div>
  );
}

function BlockView({ block, place, state, errors }: BlocksProps & { block: Block }) {
  const { snapshot } = useLooking();
  const blockId = block.block_id ?? '';
  const control = (element: InteractiveElement, i = 0) => (
    <Control
      key={`${element.action_id ?? ''}${i}`}
      element={element}
      blockId={blockId}
      place={place}
      value={state[blockId]?.[element.action_id ?? '']}
      dispatch
    />
  );
  switch (block.type) {
    case 'divider':
      return <hr />;
    case 'header':
      return <h3>{block.text.text}</h3>;
    case 'section':
      return (
        <div class={`section${block.accessory ? ' has-accessory' : ''}`}>
          <div class="section-text">
            {block.text ? <TextObject text={block.text} /> : null}
            {block.fields ? (
              <div class="fields">
                {block.fields.map((field, i) => (
                  <TextObject key={i} text={field} />
                ))}
              </div>
            ) : null}
          </div>
          {block.accessory ? (
            <div class="accessory">
              {block.accessory.type === 'image' ? <SmallImage image={block.accessory} /> : control(block.accessory)}
            </div>
          ) : null}
        </div>
      );
    case 'context':
      return (
        <div class="context">
          {block.elements.map((element, i) =>
            element.type === 'image' ? <SmallImage key={i} image={element} /> : <TextObject key={i} text={element} />,
          )}
        </div>
      );
    case 'actions':
      return <div class="actions">{block.elements.map(control)}</div>;
    case 'image': {
      const url = addressOf(block, snapshot.pictures);
      if (url === undefined) return <p class="aside">A picture stood here: {block.alt_text}</p>;
      return <Picture url={url} alt={block.alt_text} title={block.title?.text ?? ''} />;
    }
    case 'input':
      return <Field block={block} place={place} state={state} error={errors?.[blockId]} />;
    case 'markdown':
      return <Markup text={block.text.replace(/\*\*(.+?)\*\*/g, '*$1*').replace(/^#+\s+(.*)$/gm, '*$1*')} />;
    case 'table':
      return <Table block={block} />;
    case 'rich_text':
      return <RichTextView block={block} />;
  }
}

/** Pictures on other machines are not fetched: the practice page asks nobody but the practice service. */
function addressOf(
  image: { slack_file?: { id?: string | undefined; url?: string | undefined } | undefined },
  pictures: Readonly<Record<string, { url: string; deleted: boolean }>>,
): string | undefined {
  const file = pictures[image.slack_file?.id ?? image.slack_file?.url ?? ''];
  return file && !file.deleted ? file.url : undefined;
}

function SmallImage({ image }: { image: ImageElement }) {
  const { snapshot } = useLooking();
  const url = addressOf(image, snapshot.pictures);
  return url === undefined ? <span>{image.alt_text}</span> : <img class="small" src={url} alt={image.alt_text} />;
}

function Table({ block }: { block: TableBlock }) {
  const [head, ...body] = block.rows;
  const align = (column: number) => ({ textAlign: block.column_settings?.[column]?.align ?? 'left' }) as const;
  return (
    // A wide table scrolls by itself, and the keyboard must be able to do it too.
    // biome-ignore lint/a11y/noNoninteractiveTabindex: a scrollable region has to be reachable
    <section class="table" tabIndex={0} aria-label="Table">
      <table>
        <thead>
          <tr>
            {head?.map((cell, i) => (
              <th key={i} scope="col" style={align(i)}>
                <Cell cell={cell} />
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {body.map((row, r) => (
            <tr key={r}>
              {row.map((cell, i) => (
                <td key={i} style={align(i)}>
                  <Cell cell={cell} />
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  );
}

function Cell({ cell }: { cell: TableCell }) {
  if (cell.type === 'raw_text') return <>{cell.text}</>;
  if (cell.type === 'raw_number') return <>{cell.text ?? String(cell.value)}</>;
  return <RichTextView block={cell} />;
}
