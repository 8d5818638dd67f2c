/**
 * Pieces that guessable passwords are put together from: well-known first choices, keyboard runs,
 * sequences, names of months and days, and the phrases people reach for when a long password is
 * asked. Written from common knowledge; no published list was copied.
 */
const WORDS = `
password passwort passphrase passcode pass secret geheim admin administrator root user guest login logon signin
welcome hello letmein openup opensesame access changeme change default temporary temp test testing tester demo
sample example qwerty qwertz azerty qwertyuiop qwertzuiop asdf asdfgh asdfghjkl asdfghjk zxcv zxcvbn zxcvbnm yxcvbnm
qazwsx qaz wsx edc rfv wsxedc qweasd qweasdzxc asdzxc poiuytrewq lkjhgfdsa mnbvcxz abc abcd abcde abcdef abcdefg
abcdefgh abcdefghijkl abcdefghijklmnopqrstuvwxyz iloveyou iloveu ilove loveyou love lover you me my the is it this
monkey dragon tiger lion eagle falcon panther shark wolf horse cat dog kitten puppy bunny butterfly dolphin
football soccer baseball basketball hockey rugby cricket tennis golf champion winner master superman batman
spiderman starwars startrek pokemon matrix hunter ranger soldier killer ninja pirate wizard merlin phoenix thunder
lightning sunshine sunflower flower rainbow summer winter spring autumn january february march april may june july
august september october november december monday tuesday wednesday thursday friday saturday sunday morning night
princess prince queen king angel baby babygirl babyboy honey sweetheart darling sweetie chocolate cookie cheese
banana orange apple cherry pepper ginger coffee whiskey freedom liberty peace jesus christ heaven god blessed
trustno trust nobody everyone someone michael jennifer jordan thomas robert charlie daniel jessica ashley michelle
andrew matthew joshua william george harley mustang ferrari porsche mercedes corvette yamaha computer internet
google windows microsoft linux server network system database laptop iphone android samsung killme fuckyou fuckoff
asshole whatever nothing something anything please thank thanks company business office work project mining geology
geologist mine drill drillhole core gold silver copper iron nickel zinc ore deposit assay
correct battery staple correcthorsebatterystaple maryhadalittlelamb tobeornottobe thequickbrownfox jumpsover
lazydog onceuponatime maytheforcebewithyou youshallnotpass nopassword forgotpassword mypassword newpassword
supersecret topsecret verysecret in on of to for with and or not no yes new old one two three four five six seven
eight nine zero ten first second big little red green blue black white a i
`;

const PIECES = new Set(WORDS.split(/\s+/).filter((word) => word.length > 0));
const LONGEST_PIECE = Math.max(...[...PIECES].map((word) => word.length));

/** Digits and marks people put for letters. */
const STAND_INS: Readonly<Record<string, string>> = {
  '0': 'o',
  '1': 'i',
  '3': 'e',
  '4': 'a',
  '5': 's',
  '7': 't',
  '@': 'a',
  $: 's',
  '!': 'i',
};

const lettersFor = (text: string): string =>
  [...text].map((mark) => STAND_INS[mark] ?? mark).join('');

/** `abcabcabcabc`, `aaaaaaaaaaaa`: one short piece over and over. */
const isRepeat = (text: string): boolean => /^(.{1,6}?)\1+.{0,2}$/su.test(text);

const isPiece = (text: string): boolean => PIECES.has(text) || PIECES.has(lettersFor(text));

/** Whether a lowercase text is nothing but a few known pieces with digits and marks between them. */
function isMadeOfPieces(text: string, maxPieces: number): boolean {
  // fewest[i]: the fewest pieces that make the first i characters; digits and marks are free.
  const fewest = new Array<number>(text.length + 1).fill(Number.POSITIVE_INFINITY);
  fewest[0] = 0;
  for (let end = 1; end <= text.length; end++) {
    const isFree = /[^\p{L}]/u.test(text.slice(end - 1, end));
    let best = (isFree ? fewest[end - 1] : undefined) ?? Number.POSITIVE_INFINITY;
    for (let start = Math.max(0, end - LONGEST_PIECE); start < end; start++) {
      if (isPiece(text.slice(start, end)))
        best = Math.min(best, (fewest[start] ?? Number.POSITIVE_INFINITY) + 1);
    }
    fewest[end] = best;
  }
  return (fewest[text.length] ?? Number.POSITIVE_INFINITY) <= maxPieces;
}

/** Four everyday words make a passphrase only when no more than three of them stand on this list. */
const MAX_PIECES = 3;

/** Whether a password is among those tried first: known ones, and known pieces with digits put on. */
export function isCommonPassword(password: string): boolean {
  const text = password.toLowerCase();
  return isRepeat(text) || isMadeOfPieces(text, MAX_PIECES);
}
