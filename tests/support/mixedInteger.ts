import loadHighs, { type LegacyHighs } from 'highs';

/** A linear sum, told by the names of its variables. */
export type Sum = readonly (readonly [factor: number, name: string])[];

const solver: LegacyHighs = await loadHighs();

/**
 * A mixed-integer program to be minimised, written out in the CPLEX LP format and solved by HiGHS (Huangfu and Hall,
 * Math. Program. Comput. 10 (2018) 119–142), compiled to WebAssembly. Costs should be of the order of 1.
 */
export class MixedInteger {
  private readonly costs: string[] = [];
  private readonly rows: string[] = [];
  private readonly bounds: string[] = [];
  private readonly binaries: string[] = [];

  /** A variable of 0 or 1. */
  binary(name: string, cost = 0): string {
    this.binaries.push(name);
    return this.priced(name, cost);
  }

  /** A variable of 0 or more. */
  amount(name: string, cost = 0): string {
    this.bounds.push(`${name} >= 0`);
    return this.priced(name, cost);
  }

  private priced(name: string, cost: number): string {
    if (cost !== 0) this.costs.push(term([cost, name]));
    return name;
  }

  require(sum: Sum, relation: '<=' | '>=' | '=', value: number): void {
    this.rows.push(`r${this.rows.length}: ${sum.map(term).join(' ')} ${relation} ${value}`);
  }

  /** The least cost, proven to `gap` of it, and the variables; null where nothing is feasible. */
  solve(gap = 1e-9): { readonly cost: number; value(name: string): number } | null {
    const text = [
      `Minimize\n cost: ${this.costs.join(' ') || '0 none'}`,
      `Subject To\n ${this.rows.join('\n ')}`,
      `Bounds\n ${this.bounds.join('\n ')}`,
      `Binaries\n ${this.binaries.join(' ')}`,
      'End',
    ].join('\n');
    const found = solver.solve(text, {
      output_flag: false,
      mip_rel_gap: gap,
      mip_abs_gap: 0,
      mip_feasibility_tolerance: 1e-9,
      primal_feasibility_tolerance: 1e-9,
    });
    if (found.Status === 'Infeasible') return null;
    if (found.Status !== 'Optimal') throw new Error(`the solver ended with ${found.Status}`);
    return {
      cost: found.ObjectiveValue,
      value: (name) => {
        const column = found.Columns[name];
        if (!column || !('Primal' in column)) throw new Error(`no variable ${name}`);
        return column.Primal;
      },
    };
  }
}

function term([factor, name]: readonly [number, string]): string {
  return `${factor < 0 ? '-' : '+'} ${Math.abs(factor)} ${name}`;
}
