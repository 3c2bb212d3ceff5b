// SPDX-License-Identifier: GPL-3.0-or-later
#include "commands.h"
#include "output.h"

namespace soak::cli {

Result<int> helpCommand(const QStringList&) {
    print(QString(R"(soakwright: which furnace setpoint suits this heat, and why

  soakwright state  --wt LIST --at C            the equilibrium at one temperature
  soakwright sweep  --wt LIST --from C --to C   the equilibria between two, with every event
      --with LIST, --without LIST               phases let in (graphite, gas) or left out
  soakwright window --wt LIST --family NAME     limits, window and verdict of a typed chemistry
      --grade NAME, --kind NAME, --form NAME    grade to check against, treatment, product form
  soakwright window --heat ID --cycle NAME --furnace NAME --store FILE
      --setpoint C, --band-rule "added up"|"root of squares"
  soakwright triage --csv FILE --store FILE     every heat of a delivery, worst first
      --furnace NAME, --threads N
      --sheets FOLDER                           also a draft sheet of every row that fits
      --xlsx FILE                               also a workbook with live formulas, filters and charts
  soakwright import FILE --store FILE           a mill's certificates (CSV, semicolons, XLSX) into the store
      --preview                                 shows what would be stored and stores nothing
      --supplier NAME, --by NAME                whose columns these are; who imports
      --columns "HEADER=MEANING;..."            heat, grade, N ppm, or nothing to keep a column out; remembered
      --undo N                                  takes import N back, whole
  soakwright sheet  --store FILE --heat ID --cycle NAME --furnace NAME --pdf FILE
      --setpoint C, --paper a4|letter, --issue NAME   without --issue a draft is written
      --xlsx FILE, --language CODE, --second CODE     workbook; en, de, pl, pt; two languages side by side
      --record                                        a page for the chart, readings and what differed
      --templates FOLDER                              the shop's own wording and layout
  soakwright packet --store FILE --sheet NUMBER --pdf FILE   all that an auditor asks for of one job, in one PDF
      --revision LETTER
  soakwright verify CODE --store FILE           does the sheet with this code still hold?
      --copy FILE                               a bay's copy, asked when the store cannot be
  soakwright grade  --grade ID --cycle NAME --furnace NAME --store FILE
      --samples N, --fresh N, --seed N, --threads N   share of the grade's range that the cycle serves; tightened limits
  soakwright load   --heats LIST --furnace NAME --store FILE      the fewest charges for heats HEAT:CYCLE
  soakwright run    --heat ID --cycle NAME --furnace NAME --store FILE --log FILE
      --soak-start T, --soak-end T, --door T, --under T           the run record against the window
  soakwright look-back --furnace NAME --error K --store FILE      loads since the last good check, by real margin
      --known K, --since DATE, --until DATE
  soakwright trend  --store FILE DATE:SUPPLIER:FILE ...           margins and contents in time, with control limits
      --elements LIST
  soakwright evidence                           published values beside the computed ones, bias and scatter
      --family NAME, --kind NAME                only these rows
      --write FILE                              bias and scatter of the limits, for the planner
      --baseline FILE                           the computed values, for the tests
      --own FILE [--weigh-own]                  the shop's own measurements beside them; counted as firm on wish
  soakwright cycle history NAME --store FILE    every revision: what changed, who approved it, when, why
  soakwright cycle approve|freeze|unfreeze|withdraw NAME --store FILE --by NAME
      --revision N, --why TEXT, --customer NAME
  soakwright store new FILE [--demo]            a new store, empty or with the demonstration shop
  soakwright store check FILE                   pages, references, every sheet's hash, the journal's chain
  soakwright store backup FILE COPY             a checked copy, made while others work
  soakwright store restore COPY FILE            a sound copy becomes a new store
  soakwright store journal FILE                 every change: who, when, why
  soakwright store person FILE NAME --roles LIST --new-password-file FILE [--inactive]
  soakwright store roles FILE on|off            operator, inspector, approver, administrator; then every change
                                                needs --by NAME --password-file FILE
  soakwright help | --version

  LIST is C=0.05,Cr=18,Ni=10 in wt%, with commas or semicolons; Fe=bal names the balance element.
  --set NAME chooses the data set; else the balance element does.   --date 2025-04-02 is "today".
  --json prints the same answer for programs. Temperatures are in °C, differences in K.

  Exit status: 0 answered; 1 triage found rows that are outside, without window or not computed, import held rows back,
  store check found something, or verify found a sheet that is not the current one, or run, look-back
  or load that something does not fit; 2 the question is wrong (units,
  elements, names, temperatures); 3 anything else failed.
)"));
    return 0;
}

}  // namespace soak::cli
