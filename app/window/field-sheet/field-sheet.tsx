import { CheckList } from '../parts/check-list.tsx';
import { run } from '../state/command-table.ts';
import { reduction, resultsState, waitingFor } from '../state/results.ts';
import { segments } from '../state/selection.ts';
import { BudgetPart } from './budget-part.tsx';
import { ExpectedPart } from './expected-part.tsx';
import { FieldPlot } from './field-plot.tsx';
import { LeaveOutPart } from './leave-out-part.tsx';
import { NextPart } from './next-part.tsx';
import { ReductionPart } from './reduction-part.tsx';
import { ResultsTable } from './results-table.tsx';
import { SweepsPart } from './sweeps-part.tsx';

/** All segments together: the table, f0² against current, and what follows from it. */
export function FieldSheet() {
  const results = resultsState.value?.results ?? null;
  const found = reduction.value;
  const waiting = waitingFor.value.size;
  return (
    <div class="field-sheet">
      <header class="sheet-head">
        <h2>Field</h2>
        <span class="quiet" role="status">
          {waiting > 0 ? `${waiting} of ${segments.value.length} segments still to be measured` : ''}
        </span>
        <span class="spacer" />
        <button
          type="button"
          disabled={!results}
          onClick={() => run('copy-table')}
          title="For a spreadsheet (Ctrl+Shift+C)"
        >
          Copy table
        </button>
        <button
          type="button"
          disabled={!results}
          onClick={() => run('export-all')}
          title="Table, results, traces, page to print (Ctrl+E)"
        >
          Export…
        </button>
      </header>
      <ResultsTable />
      {found && found.points.length > 0 && results ? <FieldPlot results={results} /> : null}
      {found ? (
        <>
          <ReductionPart reduction={found} />
          <ExpectedPart reduction={found} />
          <CheckList checks={found.checks} none="No check found anything wrong with the sweep as a whole." />
          <LeaveOutPart reduction={found} />
          <SweepsPart reduction={found} />
          <NextPart reduction={found} />
          <BudgetPart reduction={found} />
        </>
      ) : (
        <p class="quiet">The reduction appears once segments have been measured and their currents typed.</p>
      )}
    </div>
  );
}
