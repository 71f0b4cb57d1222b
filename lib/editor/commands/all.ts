import { paintCommands } from './paint';
import { createRegistry } from './registry';
import { selectCommands } from './select';
import { viewCommands } from './view';

/** The drawing table's commands. Made once at start, so that two commands on one key are found at once. */
export const editorCommands = createRegistry([...paintCommands, ...selectCommands, ...viewCommands]);
