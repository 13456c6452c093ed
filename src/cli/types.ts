/** What the command line is given from outside: where it writes, and a clock. */
export interface CliSurroundings {
  readonly stdout: (text: string) => void;
  readonly stderr: (text: string) => void;
  /** milliseconds, for timing only */
  readonly clock: () => number;
  /** true when the process ends right after the command */
  readonly leaving: boolean;
  /** whether somebody is watching standard error */
  readonly progressWanted: boolean;
}
