/** Scores are powers of ten of a probability: within this they differ by less than the judgement behind a price does. */
const WITHIN = 0.3

/** Lets scores that were written as decimals, and are 0.3 apart in these, count as within it. */
const ROUNDING = 1e-9

/**
 * The proposals of one cell in groups that count as equally likely, the likeliest group first; within a group and over
 * all the order given, which is by falling score, stays.
 *
 * A group goes on while a score lies within 0.3 of its first, so that any two of a group are equals: neighbours that
 * each lie close to the next cannot pass off a poor explanation as the equal of a good one.
 *
 * Source: our own.
 */
export function equalProposals<Scored extends { score: number }>(proposals: readonly Scored[]): Scored[][] {
  const groups: Scored[][] = []
  for (const proposal of proposals) {
    const group = groups.at(-1)
    if (group !== undefined && group[0]!.score - proposal.score <= WITHIN + ROUNDING) group.push(proposal)
    else groups.push([proposal])
  }
  return groups
}
