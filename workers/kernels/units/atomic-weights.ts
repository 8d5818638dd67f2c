/**
 * Standard atomic weights (g/mol) frozen at the 2021 values; where IUPAC states an interval, the
 * conventional value.
 *
 * @see Prohaska et al. (2022), Standard atomic weights of the elements 2021 (IUPAC Technical
 *   Report), Pure Appl. Chem. 94.
 */
const ELEMENTS = [
  ['H', 'hydrogen', 1.008],
  ['Li', 'lithium', 6.94],
  ['Be', 'beryllium', 9.0121831],
  ['B', 'boron', 10.81],
  ['C', 'carbon', 12.011],
  ['N', 'nitrogen', 14.007],
  ['O', 'oxygen', 15.999],
  ['F', 'fluorine', 18.998403162],
  ['Na', 'sodium', 22.98976928],
  ['Mg', 'magnesium', 24.305],
  ['Al', 'aluminium', 26.9815384],
  ['Si', 'silicon', 28.085],
  ['P', 'phosphorus', 30.973761998],
  ['S', 'sulphur', 32.06],
  ['Cl', 'chlorine', 35.45],
  ['K', 'potassium', 39.0983],
  ['Ca', 'calcium', 40.078],
  ['Sc', 'scandium', 44.955907],
  ['Ti', 'titanium', 47.867],
  ['V', 'vanadium', 50.9415],
  ['Cr', 'chromium', 51.9961],
  ['Mn', 'manganese', 54.938043],
  ['Fe', 'iron', 55.845],
  ['Co', 'cobalt', 58.933194],
  ['Ni', 'nickel', 58.6934],
  ['Cu', 'copper', 63.546],
  ['Zn', 'zinc', 65.38],
  ['Ga', 'gallium', 69.723],
  ['Ge', 'germanium', 72.63],
  ['As', 'arsenic', 74.921595],
  ['Se', 'selenium', 78.971],
  ['Br', 'bromine', 79.904],
  ['Rb', 'rubidium', 85.4678],
  ['Sr', 'strontium', 87.62],
  ['Y', 'yttrium', 88.905838],
  ['Zr', 'zirconium', 91.224],
  ['Nb', 'niobium', 92.90637],
  ['Mo', 'molybdenum', 95.95],
  ['Ru', 'ruthenium', 101.07],
  ['Rh', 'rhodium', 102.90549],
  ['Pd', 'palladium', 106.42],
  ['Ag', 'silver', 107.8682],
  ['Cd', 'cadmium', 112.414],
  ['In', 'indium', 114.818],
  ['Sn', 'tin', 118.71],
  ['Sb', 'antimony', 121.76],
  ['Te', 'tellurium', 127.6],
  ['I', 'iodine', 126.90447],
  ['Cs', 'caesium', 132.90545196],
  ['Ba', 'barium', 137.327],
  ['La', 'lanthanum', 138.90547],
  ['Ce', 'cerium', 140.116],
  ['Pr', 'praseodymium', 140.90766],
  ['Nd', 'neodymium', 144.242],
  ['Sm', 'samarium', 150.36],
  ['Eu', 'europium', 151.964],
  ['Gd', 'gadolinium', 157.25],
  ['Tb', 'terbium', 158.925354],
  ['Dy', 'dysprosium', 162.5],
  ['Ho', 'holmium', 164.930329],
  ['Er', 'erbium', 167.259],
  ['Tm', 'thulium', 168.934219],
  ['Yb', 'ytterbium', 173.045],
  ['Lu', 'lutetium', 174.9668],
  ['Hf', 'hafnium', 178.486],
  ['Ta', 'tantalum', 180.94788],
  ['W', 'tungsten', 183.84],
  ['Re', 'rhenium', 186.207],
  ['Os', 'osmium', 190.23],
  ['Ir', 'iridium', 192.217],
  ['Pt', 'platinum', 195.084],
  ['Au', 'gold', 196.96657],
  ['Hg', 'mercury', 200.592],
  ['Tl', 'thallium', 204.38],
  ['Pb', 'lead', 207.2],
  ['Bi', 'bismuth', 208.9804],
  ['Th', 'thorium', 232.0377],
  ['U', 'uranium', 238.02891],
] as const;

/** One chemical element the product knows. */
export interface ChemicalElement {
  symbol: string;
  /** English name in lower case. */
  name: string;
  /** g/mol. */
  weight: number;
}

/** Elements by symbol, in order of atomic number. */
export const ELEMENT_BY_SYMBOL: ReadonlyMap<string, ChemicalElement> = new Map(
  ELEMENTS.map(([symbol, name, weight]) => [symbol, { symbol, name, weight }]),
);

/** Symbols by English name, American spellings included. */
export const SYMBOL_BY_NAME: ReadonlyMap<string, string> = new Map([
  ...ELEMENTS.map(([symbol, name]): [string, string] => [name, symbol]),
  ['aluminum', 'Al'],
  ['sulfur', 'S'],
  ['cesium', 'Cs'],
]);
