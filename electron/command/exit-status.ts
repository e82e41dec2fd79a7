/** The exit statuses of the command, as the contract fixes them; 130 is what shells expect after Ctrl-C (128 + SIGINT). */
export const EXIT_DONE = 0;
export const EXIT_INTERNAL_FAULT = 1;
/** Bad usage, or a faulty scenario. */
export const EXIT_BAD_INPUT = 2;
/** The solver could not finish; what was computed is kept. */
export const EXIT_NOT_FINISHED = 3;
/** Stopped from outside (Ctrl-C, SIGTERM); what was computed is kept unless a second signal came. */
export const EXIT_INTERRUPTED = 130;
