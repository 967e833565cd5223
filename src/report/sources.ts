/** A published source of a method. */
export interface Source {
  /** Short name, as BibTeX keys are written: first author and year. */
  readonly key: string;
  /** Family name and initials of each author, as in `Lizier, J. T.`. */
  readonly authors: readonly string[];
  readonly year: number;
  readonly title: string;
  /** Journal with volume and pages, the book it stands in, or what a book is known by. */
  readonly where:
    | { readonly journal: string; readonly volume: string; readonly pages: string }
    | { readonly booktitle: string; readonly publisher: string; readonly pages: string }
    | { readonly edition: string; readonly publisher: string };
}

/** Every source that a run may have used, by key. */
export const SOURCES = {
  lizier2012: article(
    ["Lizier, J. T.", "Prokopenko, M.", "Zomaya, A. Y."],
    2012,
    "Local measures of information storage in complex distributed computation",
    ["Information Sciences", "208", "39–54"],
  ),
  shannon1948: article(["Shannon, C. E."], 1948, "A mathematical theory of communication", [
    "Bell System Technical Journal",
    "27",
    "379–423",
  ]),
  miller1955: chapter(["Miller, G. A."], 1955, "Note on the bias of information estimates", {
    booktitle: "Information Theory in Psychology: Problems and Methods II-B",
    publisher: "Free Press",
    pages: "95–100",
  }),
  hausser2009: article(
    ["Hausser, J.", "Strimmer, K."],
    2009,
    "Entropy inference and the James–Stein estimator, with application to nonlinear gene association networks",
    ["Journal of Machine Learning Research", "10", "1469–1484"],
  ),
  cover2006: {
    authors: ["Cover, T. M.", "Thomas, J. A."],
    year: 2006,
    title: "Elements of Information Theory",
    where: { edition: "second edition", publisher: "Wiley" },
  },
  kraskov2004: article(
    ["Kraskov, A.", "Stögbauer, H.", "Grassberger, P."],
    2004,
    "Estimating mutual information",
    ["Physical Review E", "69", "066138"],
  ),
  theiler1986: article(
    ["Theiler, J."],
    1986,
    "Spurious dimension from correlation algorithms applied to limited time-series data",
    ["Physical Review A", "34", "2427–2432"],
  ),
  schreiber2000: article(["Schreiber, T."], 2000, "Measuring information transfer", [
    "Physical Review Letters",
    "85",
    "461–464",
  ]),
  lizier2010: article(
    ["Lizier, J. T.", "Prokopenko, M.", "Zomaya, A. Y."],
    2010,
    "Information modification and particle collisions in distributed computation",
    ["Chaos", "20", "037109"],
  ),
  barnett2009: article(
    ["Barnett, L.", "Barrett, A. B.", "Seth, A. K."],
    2009,
    "Granger causality and transfer entropy are equivalent for Gaussian variables",
    ["Physical Review Letters", "103", "238701"],
  ),
  bandt2002: article(
    ["Bandt, C.", "Pompe, B."],
    2002,
    "Permutation entropy: a natural complexity measure for time series",
    ["Physical Review Letters", "88", "174102"],
  ),
  crutchfield2003: article(
    ["Crutchfield, J. P.", "Feldman, D. P."],
    2003,
    "Regularities unseen, randomness observed: levels of entropy convergence",
    ["Chaos", "13", "25–54"],
  ),
  fraser1986: article(
    ["Fraser, A. M.", "Swinney, H. L."],
    1986,
    "Independent coordinates for strange attractors from mutual information",
    ["Physical Review A", "33", "1134–1140"],
  ),
  ragwitz2002: article(
    ["Ragwitz, M.", "Kantz, H."],
    2002,
    "Markov models from data by simple nonlinear time series predictors in delay embedding spaces",
    ["Physical Review E", "65", "056201"],
  ),
  faes2011: article(
    ["Faes, L.", "Nollo, G.", "Porta, A."],
    2011,
    "Information-based detection of nonlinear Granger causality in multivariate processes via a nonuniform embedding technique",
    ["Physical Review E", "83", "051112"],
  ),
  phipson2010: article(
    ["Phipson, B.", "Smyth, G. K."],
    2010,
    "Permutation P-values should never be zero: calculating exact P-values when permutations are randomly drawn",
    ["Statistical Applications in Genetics and Molecular Biology", "9", "39"],
  ),
  besag1991: article(["Besag, J.", "Clifford, P."], 1991, "Sequential Monte Carlo p-values", [
    "Biometrika",
    "78",
    "301–304",
  ]),
  wilks1938: article(
    ["Wilks, S. S."],
    1938,
    "The large-sample distribution of the likelihood ratio for testing composite hypotheses",
    ["Annals of Mathematical Statistics", "9", "60–62"],
  ),
  schmitz2000: article(["Schreiber, T.", "Schmitz, A."], 2000, "Surrogate time series", [
    "Physica D",
    "142",
    "346–382",
  ]),
  benjamini1995: article(
    ["Benjamini, Y.", "Hochberg, Y."],
    1995,
    "Controlling the false discovery rate: a practical and powerful approach to multiple testing",
    ["Journal of the Royal Statistical Society B", "57", "289–300"],
  ),
  benjamini2001: article(
    ["Benjamini, Y.", "Yekutieli, D."],
    2001,
    "The control of the false discovery rate in multiple testing under dependency",
    ["Annals of Statistics", "29", "1165–1188"],
  ),
  politis1994: article(["Politis, D. N.", "Romano, J. P."], 1994, "The stationary bootstrap", [
    "Journal of the American Statistical Association",
    "89",
    "1303–1313",
  ]),
  politis2004: article(
    ["Politis, D. N.", "White, H."],
    2004,
    "Automatic block-length selection for the dependent bootstrap",
    ["Econometric Reviews", "23", "53–70"],
  ),
  patton2009: article(
    ["Patton, A.", "Politis, D. N.", "White, H."],
    2009,
    "Correction to “Automatic block-length selection for the dependent bootstrap”",
    ["Econometric Reviews", "28", "372–375"],
  ),
  moran1950: article(["Moran, P. A. P."], 1950, "Notes on continuous stochastic phenomena", [
    "Biometrika",
    "37",
    "17–23",
  ]),
  blondel2008: article(
    ["Blondel, V. D.", "Guillaume, J.-L.", "Lambiotte, R.", "Lefebvre, E."],
    2008,
    "Fast unfolding of communities in large networks",
    ["Journal of Statistical Mechanics", "2008", "P10008"],
  ),
  goldstein1996: article(
    ["Goldstein, H.", "Spiegelhalter, D. J."],
    1996,
    "League tables and their limitations: statistical issues in comparisons of institutional performance",
    ["Journal of the Royal Statistical Society A", "159", "385–443"],
  ),
  watts1998: article(
    ["Watts, D. J.", "Strogatz, S. H."],
    1998,
    "Collective dynamics of ‘small-world’ networks",
    ["Nature", "393", "440–442"],
  ),
  spearman1904: article(
    ["Spearman, C."],
    1904,
    "The proof and measurement of association between two things",
    ["American Journal of Psychology", "15", "72–101"],
  ),
  kendall1945: article(["Kendall, M. G."], 1945, "The treatment of ties in ranking problems", [
    "Biometrika",
    "33",
    "239–251",
  ]),
} as const satisfies Record<string, Omit<Source, "key">>;

export type SourceKey = keyof typeof SOURCES;

/** The source of a key. */
export function sourceOf(key: SourceKey): Source {
  return { key, ...SOURCES[key] };
}

/** `Lizier, J. T., Prokopenko, M., and Zomaya, A. Y. (2012). Title. Information Sciences 208: 39–54.` */
export function referenceText({ authors, year, title, where }: Source): string {
  const place =
    "journal" in where
      ? `${where.journal} ${where.volume}: ${where.pages}`
      : Object.values(where).join(", ");
  return `${listed(authors)} (${year}). ${title}. ${place}.`;
}

/** The source as an entry of BibTeX. */
export function bibtexEntry({ key, authors, year, title, where }: Source): string {
  const fields: [string, string][] = [
    ["author", authors.join(" and ")],
    ["year", String(year)],
    ["title", `{${title}}`],
    ...Object.entries(where).map(([name, value]): [string, string] => [
      name,
      value.replaceAll("–", "--"),
    ]),
  ];
  const kind = "journal" in where ? "article" : "edition" in where ? "book" : "incollection";
  return `@${kind}{${key},\n${fields.map(([name, value]) => `  ${name} = {${value}}`).join(",\n")}\n}`;
}

function listed(authors: readonly string[]): string {
  const last = authors.at(-1) ?? "";
  return authors.length < 2 ? last : `${authors.slice(0, -1).join(", ")}, and ${last}`;
}

function article(
  authors: readonly string[],
  year: number,
  title: string,
  [journal, volume, pages]: readonly [journal: string, volume: string, pages: string],
): Omit<Source, "key"> {
  return { authors, year, title, where: { journal, volume, pages } };
}

function chapter(
  authors: readonly string[],
  year: number,
  title: string,
  where: Extract<Source["where"], { booktitle: string }>,
): Omit<Source, "key"> {
  return { authors, year, title, where };
}
