export const HELP = `Ebbline: has churn moved?

  ebb ask FILE [words of the question ...]   read an export and answer
  ebb chart --counts "12,15,8" --sizes 50    chart ready counts

Options of ask, about the question; they win over its words
  --tenure "3 months"        age at which churn is read
  --segment COLUMN=VALUE     only these accounts
  --subgroup-size N          accounts a point
  --by start                 order of the points: by when accounts started
                             (the default, and the only one in this version)

Options of ask, about the file
  --as-of YYYY-MM-DD         last day the data is complete for
  --columns ROLE=COL,...     which column is which; the roles are start, end, id,
                             segment and amount: --columns start=joined,end=left
  --dates iso|dmy|mdy        how dates are written: year, day or month first

Options of chart
  --counts "12,15,8"         accounts lost, one count a point
  --sizes 50                 accounts a point: one size for all, or as many as
                             there are counts

Options of both
  --baseline K               points that set the usual level
  --chart KIND               auto     the kind that fits the points (ask does so)
                             p        limits from chance alone (chart does so)
                             p-prime  limits from how much the points really vary
  --picture OUT.png          draw the chart
  --points OUT.csv           write the points
  --json                     one JSON object on standard output
  -h, --help                 this text
  --version                  the version

A figure from here says that something changed, not why. For pay, forecasts,
investors or auditors, your company's own written definitions and its finance
and legal people decide.
`;
