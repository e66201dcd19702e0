/** What stands wherever a result could be taken for a design: in the report, the summary, the model and on the page. */
export const caution =
  'This is geometry only. Overhead glass and its support are to be specified by a qualified engineer to the local code: ' +
  'usually a laminated inner pane, the residual capacity after breakage, loads, deflection, drainage, thermal and access checks.'
