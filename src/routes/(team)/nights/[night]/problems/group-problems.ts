import type { NightSnapshot } from '$lib/domain/night';

type NightProblem = NightSnapshot['problems'][number];

export interface ProblemGroup {
  code: string;
  /** The first problem of the group stands for all. */
  first: NightProblem;
  /** All of them in the order of their arrival, the first included. */
  problems: NightProblem[];
}

/** From this many on, problems of one kind are told once: an observer mends them once. */
const TOGETHER_FROM = 4;

/** Problems in the order of their arrival; many of one kind stand together at the place of the first. */
export function groupProblems(problems: readonly NightProblem[]): ProblemGroup[] {
  const byCode = new Map<string, NightProblem[]>();
  for (const problem of problems) byCode.set(problem.code, [...(byCode.get(problem.code) ?? []), problem]);
  const groups: ProblemGroup[] = [];
  for (const problem of problems) {
    const kin = byCode.get(problem.code)!;
    if (kin.length < TOGETHER_FROM) groups.push({ code: problem.code, first: problem, problems: [problem] });
    else if (kin[0] === problem) groups.push({ code: problem.code, first: problem, problems: kin });
  }
  return groups;
}

/** Where in its file a problem lies, in words, or empty: what the place adds to the file's name. */
export function placeInFile({ where, file }: NightProblem): string {
  const place = where.startsWith(file) ? where.slice(file.length).replace(/^[\s,:;]+/, '') : where;
  return place === file ? '' : place;
}
