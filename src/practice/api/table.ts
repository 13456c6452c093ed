/** Every method the practice service knows. */
import { chat } from './chat.ts';
import { conversations } from './conversations.ts';
import { files } from './files.ts';
import type { MethodTable } from './method.ts';
import { people } from './people.ts';
import { reactions } from './reactions.ts';
import { views } from './views.ts';

export const METHODS: MethodTable = { ...people, ...conversations, ...chat, ...files, ...reactions, ...views };
