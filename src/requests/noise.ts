const list = (words: string): ReadonlySet<string> => new Set(words.split(/\s+/).filter(Boolean));

/** Words that ask whether it moved. */
export const MOVING = list(`
  moved move moves moving movement change changes changed changing shift shifted up down rise rises risen rising rose increase
  increased increasing fall falls fallen falling fell drop dropped dropping decrease decreased decreasing higher lower worse better
  worsened improved improve improving steady more fewer less doubled halved real significant significantly noise chance`);

/** Words that say the question is about churn and whether it moved. */
export const ASKING: ReadonlySet<string> = new Set([
  ...MOVING,
  ...list(`
  churn churns churned churning attrition retention lose loses losing lost loss losses leave leaves leaving left quit quitting cancel
  cancels cancelled canceled cancelling canceling cancellation cancellations verdict chart picture ask again stay staying stayed`),
]);

/** Words that carry no meaning for the grammar. */
export const NOISE = list(`
  a an the after this that these those it its it's of on at in for to from with within by as and or also but so if than then there here
  has have had having do does did doing is are was were be been being isn't aren't wasn't hasn't haven't can could would should will
  may might please hey hi hello dear thanks thank you your yours we our ours us i me my they their them he she one ones
  ebbline ebb bot customer customers account accounts subscriber subscribers subscription subscriptions member members people
  client clients logo rate rates level usual figure figures number numbers percentage percent question tell show give check look see
  know think want like let's let what what's how about whether any anything some ever now today currently still yet really actually
  just only recently lately much many early first point points among started starting start starts joined who've
  before set statistically problem our's new since plan tier data through read late settle judge judged judging against days go going gone went get getting got out off right ok okay well s t`);

/** Words that may stand around a segment value: "the Orchard plan". */
export const SEGMENT_WORDS = list(
  'plan plans tier tiers segment segments group product products package packages subscribers',
);

/** Prepositions that belong to the piece that follows when that piece is reported back. */
export const LEADING = list(
  'since after by per in for of with within on than through until before during over between to via at from',
);
