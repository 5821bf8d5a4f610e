/** Exit codes of contract section 5: the one place where they stand. */
export const exitCodes = {
  done: 0,
  fault: 1,
  usage: 2,
  damaged: 3,
  someUnread: 4,
  held: 5,
  shareAway: 6,
  noSpace: 7,
  interrupted: 130,
  terminated: 143,
} as const;
