import { contents } from './contents.js';
import type { DirectiveKind } from './directive.js';
import { each } from './each.js';
import { figure } from './figure.js';
import { footer } from './footer.js';
import { notes } from './notes.js';
import { section } from './section.js';
import { sentence } from './sentence.js';
import { csv, see, table } from './table.js';
import { value } from './value.js';

export const directiveKinds: Readonly<Record<string, DirectiveKind>> = { contents, csv, each, figure, footer, notes, section, see, sentence, table, value };
