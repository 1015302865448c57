/** Stands on sign-in, on each run, report, decision and export, word for word. */
export const LONG_CAUTION =
	"Keelbook supports the institution's own model-risk governance. It does not replace it, nor the judgement of qualified staff, nor the rules of the supervisor.";

/** Stands in the folio line of every signed-in page. */
export const SHORT_CAUTION = "Supports, and does not replace, the institution's own model-risk governance.";
