/** Names, for a program that the launcher starts, the process that it must not outlive. */
export const PARENT = "WEIGHHOUSE_PARENT";
