/** What a column that is no analyte holds. `skip` is what nothing could be said of. */
export type HeaderRole =
  | 'skip'
  | 'hole'
  | 'from'
  | 'to'
  | 'depth'
  | 'sample'
  | 'x'
  | 'y'
  | 'z'
  | 'length'
  | 'azimuth'
  | 'dip'
  | 'dip-direction'
  | 'alpha'
  | 'beta'
  | 'confidence'
  | 'structure-type'
  | 'code'
  | 'name'
  | 'campaign'
  | 'laboratory'
  | 'batch'
  | 'date'
  | 'note';

/** What a `code`, `name` or `note` column is about, where its header says so. */
export type HeaderTopic = 'lithology' | 'weathering' | 'alteration' | 'fault' | 'gamma';

/** A header word and what it stands for. */
export interface HeaderWord {
  role: HeaderRole;
  topic: HeaderTopic | null;
  /** Set when the word has a second common meaning. */
  caution: string | null;
}

type Entry = readonly [role: HeaderRole, words: string, topic?: HeaderTopic, caution?: string];

/** Words without separators, in lower case (common practice in drill-hole tables). */
const ENTRIES: readonly Entry[] = [
  [
    'hole',
    'hole holeid holeno holenr holename holenumber bhid dhid dh ddh drillhole drillholeid drillholeno borehole boreholeid boreid collarid wellid',
  ],
  ['from', 'from fromdepth depthfrom fr sampfrom samplefrom intervalfrom geolfrom'],
  ['from', 'top start', undefined, 'could also be a time or an elevation'],
  ['to', 'to todepth depthto sampto sampleto intervalto geolto'],
  ['to', 'bottom end', undefined, 'could also be a time or an elevation'],
  ['depth', 'depth atdepth depthat surveydepth measureddepth md downholedepth'],
  ['depth', 'at distance', undefined, 'read as depth down the hole'],
  ['sample', 'sample sampleid sampleno samplenr samplenumber samplename sampid sampno'],
  [
    'x',
    'x xloc xcoord xcoordinate xcollar collarx xmid midx xworld east easting eastings utme gride',
  ],
  [
    'y',
    'ym yloc ycoord ycoordinate ycollar collary ymid midy yworld north northing northings utmn gridn',
  ],
  [
    'z',
    'z zloc zcoord zcoordinate zcollar collarz zmid midz zworld elevation elev rl reducedlevel',
  ],
  ['z', 'altitude height', undefined, 'read as elevation'],
  [
    'length',
    'length holelength totaldepth depthtotal maxdepth finaldepth enddepth endofhole eoh eohdepth td',
  ],
  ['azimuth', 'azimuth azi azim az holeazimuth surveyazimuth'],
  [
    'azimuth',
    'bearing brg azimuthmag azimag azimuthmagnetic magazimuth magazi magneticazimuth',
    undefined,
    'may be magnetic: the grid azimuth is expected',
  ],
  ['azimuth', 'azimuthgrid azigrid gridazimuth gridazi azimuthtrue azitrue'],
  ['dip', 'dip holedip surveydip dipangle'],
  [
    'dip',
    'inclination incl inc plunge',
    undefined,
    'may count from the vertical: a dip from the horizontal is expected',
  ],
  ['dip-direction', 'dipdirection dipdir dipdirn dipdirect ddir dipazimuth dipazi'],
  ['dip-direction', 'dd', undefined, 'read as dip direction'],
  ['alpha', 'alpha alphaangle'],
  ['beta', 'beta betaangle'],
  ['note', 'gamma gammaangle', 'gamma', 'gamma, the angle of a line in its plane: kept as a note'],
  [
    'confidence',
    'confidence conf confidencegrade orientationconfidence oriconfidence oriconf orientationquality oriquality',
  ],
  ['confidence', 'quality reliability', undefined, 'read as the confidence of an orientation'],
  [
    'structure-type',
    'structuretype structype structtype structure struct structurecode feature featuretype defect defecttype',
  ],
  ['structure-type', 'type', undefined, 'read as a structure type'],
  [
    'code',
    'lithology lith litho lith1 lithcode lithologycode rock rocktype rockcode rockname geology geolcode formation stratigraphy strat',
    'lithology',
  ],
  [
    'code',
    'weathering weath weathcode weatheringcode oxidation oxidationstate oxstate oxcode regolith',
    'weathering',
  ],
  ['code', 'alteration altcode alterationcode alterationtype', 'alteration'],
  ['code', 'alt', 'alteration', 'could also be an altitude'],
  ['code', 'code logcode'],
  ['name', 'fault faultname faultid faultcode', 'fault'],
  ['name', 'name'],
  [
    'campaign',
    'campaign drillcampaign program programme drillprogram drillprogramme phase drillphase',
  ],
  ['laboratory', 'laboratory lab labname labcode laboratoryname'],
  [
    'batch',
    'batch batchid batchno batchnumber labbatch despatch despatchno dispatch dispatchno labjob labjobno jobno workorder certificate certificateno reportno',
  ],
  [
    'date',
    'date surveydate assaydate dateassayed drilldate datedrilled startdate enddate sampledate reportdate datereported logdate datelogged',
  ],
  ['note', 'note notes comment comments remark remarks description'],
];

const WORDS: ReadonlyMap<string, HeaderWord> = new Map(
  ENTRIES.flatMap(([role, words, topic = null, caution = null]) =>
    words.split(' ').map((word): [string, HeaderWord] => [word, { role, topic, caution }]),
  ),
);

/** Units of length and angle that may end such a header: `FROM_M`, `Dip (deg)`. */
const TRAILING_UNIT = /(metres?|meters?|mtrs?|m|degrees?|degs?|°)$/;

/** What a header without an analyte stands for, or null. */
export function readHeaderWord(header: string): HeaderWord | null {
  const compact = header.toLowerCase().replace(/[^a-z0-9°]/g, '');
  return WORDS.get(compact) ?? WORDS.get(compact.replace(TRAILING_UNIT, '')) ?? null;
}
