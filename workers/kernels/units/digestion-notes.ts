/** What four-acid digestion and its usual finish may do to one element. */
export interface DigestionNote {
  element: string;
  effect: 'partly-opened' | 'lost' | 'precipitated' | 'interference' | 'not-an-assay';
  /** In a few words, for a person. */
  note: string;
}

/** Minerals that resist, by element (textbook knowledge, from memory). */
const PARTLY_OPENED = [
  ['Zr Hf', 'held in zircon, which hardly dissolves'],
  ['Dy Ho Er Tm Yb Lu', 'partly held in zircon and xenotime'],
  ['La Ce Pr Nd Th', 'partly held in monazite'],
  ['U', 'partly held in zircon'],
  ['Cr', 'held in chromite'],
  ['Sn', 'held in cassiterite'],
  ['Ba', 'held in barite, or brought down as sulphate'],
  ['Ti', 'partly held in rutile and ilmenite'],
  ['Nb Ta', 'held in columbite and tantalite'],
  ['W', 'brought down as tungstic acid'],
  ['Al', 'partly held in corundum, kyanite, andalusite, spinel and topaz'],
  ['Be', 'partly held in beryl'],
] as const;

const LOST = [
  ['Si', 'lost as silicon tetrafluoride: not an assay'],
  ['B', 'lost as boron trifluoride: not an assay'],
  ['Hg', 'lost on heating: ask for a method of its own'],
  ['As Sb Ge Os Re Se Te', 'partly lost at high fuming temperature'],
  ['Cr', 'partly lost as chromyl chloride'],
] as const;

const PRECIPITATED = [
  ['Ca', 'may stay behind as fluoride when fuming is short'],
  ['Ag', 'may come down as chloride at high grades'],
  ['Pb', 'may come down as sulphate'],
] as const;

const INTERFERENCE = [
  [
    'As Se',
    'argon chloride and doubly charged rare earths lie on its mass in plasma mass spectrometry',
  ],
  ['Fe', 'argon oxide lies on its main mass in plasma mass spectrometry'],
  ['Ag', 'zirconium oxide lies on its mass in plasma mass spectrometry'],
  ['Hf Ta', 'oxides of rare earths lie on its mass in plasma mass spectrometry'],
] as const;

const NOTES: readonly DigestionNote[] = (
  [
    ['partly-opened', PARTLY_OPENED],
    ['lost', LOST],
    ['precipitated', PRECIPITATED],
    ['interference', INTERFERENCE],
    [
      'not-an-assay',
      [['Au', 'coarse gold and its matrix need fire assay: keep it beside the parts']],
    ],
  ] as const
).flatMap(([effect, entries]) =>
  entries.flatMap(([elements, note]) =>
    elements.split(' ').map((element): DigestionNote => ({ element, effect, note })),
  ),
);

/**
 * Cautions about an element by four-acid digestion, which is near-total and not total: a change of
 * laboratory, digestion or fuming time may look like a change of rock. From memory (textbook
 * knowledge); compare with a fusion before such elements decide on domains.
 *
 * @returns None for an element nothing is known against.
 */
export function digestionNotes(element: string): readonly DigestionNote[] {
  return NOTES.filter((note) => note.element === element);
}
