export const HELP = `Ebbline: has churn moved?

  ebb ask FILE [words of the question ...]   read an export and answer
  ebb chart --counts "12,15,8" --sizes 50    chart ready counts

Questions around it, with the same options
  ebb where FILE              which groups moved, and was it the mix?
  ebb plan FILE               at which age, in which size, and how long until a verdict
  ebb early FILE              account by account, without waiting for a full point
  ebb revenue FILE            has revenue churn moved?
  ebb reconcile FILE 14.2%    which calculation gives a reported figure
  ebb worth FILE              how long an account lasts, and what it brings
  ebb target FILE 5%          is a target met beyond chance?
  ebb spread FILE             do the points vary more than chance allows?
  ebb explain FILE            how the verdict was reached, step by step

Options about the question; they win over its words
  --tenure "3 months"        age at which churn is read
  --segment COLUMN=VALUE     only these accounts
  --subgroup-size N          accounts a point
  --by start                 order of the points: by when accounts started
       renewal               by renewal date
       calendar              by calendar month
  --tests 1,2,5,6            which tests decide, as numbered by Nelson (1984)

Options about the file
  --as-of YYYY-MM-DD         last day the data is complete for
  --columns ROLE=COL,...     which column is which; the roles are start, end, id,
                             segment, amount and currency: --columns start=joined,end=left
  --dates iso|dmy|mdy        how dates are written: year, day or month first

Options of chart
  --counts "12,15,8"         accounts lost, one count a point
  --sizes 50                 accounts a point: one size for all, or as many as
                             there are counts
  --values "12,30,7"         ready values for --chart g, t or individuals

Options of ask and chart
  --baseline K               points that set the usual level
  --chart KIND               auto     the kind that fits the points (ask does so)
                             p        limits from chance alone (chart does so)
                             p-prime  limits from how much the points really vary
                             g        rare losses: accounts from one to the next
                             t        rare losses: days from one to the next
                             individuals  a ratio that is no count, such as revenue
                             ewma     the smoothed share: small lasting shifts
                             cusum    account by account
  --picture OUT.png          draw the chart
  --points OUT.csv           write the points
  --json                     one JSON object on standard output
  -h, --help                 this text
  --version                  the version

A figure from here says that something changed, not why. For pay, forecasts,
investors or auditors, your company's own written definitions and its finance
and legal people decide.
`;
