/** Where a command works: on every page, or while a spectrum is reviewed. */
export type Scope = 'everywhere' | 'review';

interface Command {
  /** What it does, as the help sheet says it. */
  label: string;
  scope: Scope;
  /** Key names as keyOfEvent gives them; the first is shown on buttons. */
  keys: readonly string[];
  /** Whether holding the key down does it again and again. */
  mayRepeat?: boolean;
}

const TABLE = {
  help: { label: 'keys', scope: 'everywhere', keys: ['?'] },
  left: { label: 'redshift 30 km/s down', scope: 'review', keys: ['ArrowLeft'], mayRepeat: true },
  right: { label: 'redshift 30 km/s up', scope: 'review', keys: ['ArrowRight'], mayRepeat: true },
  farLeft: { label: 'redshift 300 km/s down', scope: 'review', keys: ['Shift+ArrowLeft'], mayRepeat: true },
  farRight: { label: 'redshift 300 km/s up', scope: 'review', keys: ['Shift+ArrowRight'], mayRepeat: true },
  candidateUp: { label: 'candidate above', scope: 'review', keys: ['ArrowUp'] },
  candidateDown: { label: 'candidate below', scope: 'review', keys: ['ArrowDown'] },
  snap: { label: 'snap to the best fit near', scope: 'review', keys: ['v'] },
  namePeak: { label: 'name the peak under the cursor', scope: 'review', keys: ['t'] },
  zoomIn: { label: 'zoom in', scope: 'review', keys: ['+', '='], mayRepeat: true },
  zoomOut: { label: 'zoom out', scope: 'review', keys: ['-'], mayRepeat: true },
  whole: { label: 'all of the spectrum', scope: 'review', keys: ['0'] },
  smooth: { label: 'smooth', scope: 'review', keys: ['m'] },
  fluxTaller: { label: 'flux axis: taller', scope: 'review', keys: [']'], mayRepeat: true },
  fluxFlatter: { label: 'flux axis: flatter', scope: 'review', keys: ['['], mayRepeat: true },
  residuals: { label: 'residuals', scope: 'review', keys: ['r'] },
  beside: { label: 'other spectra of the target', scope: 'review', keys: ['o'] },
  plot: { label: 'what the plot shows', scope: 'review', keys: ['w'] },
  brush: { label: 'brush: drag to mask', scope: 'review', keys: ['b'] },
  masks: { label: 'masks by numbers', scope: 'review', keys: ['k'] },
  undoMask: { label: 'undo the last mask', scope: 'review', keys: ['j'] },
  lines: { label: 'table of lines', scope: 'review', keys: ['l'] },
  secure: { label: 'confidence: secure', scope: 'review', keys: ['s'] },
  probable: { label: 'confidence: probable', scope: 'review', keys: ['p'] },
  ambiguous: { label: 'confidence: ambiguous', scope: 'review', keys: ['a'] },
  none: { label: 'confidence: none', scope: 'review', keys: ['n'] },
  accept: { label: 'accept the candidate, and next', scope: 'review', keys: ['Enter'] },
  setByHand: { label: 'set the moved redshift, and next', scope: 'review', keys: ['z'] },
  noRedshift: { label: 'no redshift, and next', scope: 'review', keys: ['x'] },
  second: { label: 'keep as second redshift, or let go', scope: 'review', keys: ['d'] },
  undo: { label: 'undo the last verdict', scope: 'review', keys: ['u'] },
  flags: { label: 'to the flags', scope: 'review', keys: ['f'] },
  comment: { label: 'to the comment', scope: 'review', keys: ['c'] },
  passOn: { label: 'pass it on to someone', scope: 'review', keys: ['g'] },
  question: { label: 'to the open question', scope: 'review', keys: ['q'] },
  previous: { label: 'previous, without a verdict', scope: 'review', keys: [','] },
  next: { label: 'next, without a verdict', scope: 'review', keys: ['.'] },
} as const satisfies Record<string, Command>;

export type CommandId = keyof typeof TABLE;
/** Every command that has a key. The bindings, the help sheet and `aria-keyshortcuts` are all made from this table. */
export const COMMANDS: Readonly<Record<CommandId, Command>> = TABLE;
export const COMMAND_IDS = Object.keys(TABLE) as CommandId[];
