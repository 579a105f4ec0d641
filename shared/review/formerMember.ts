/** How the contributions of somebody who deleted the account are credited. */

export const CREDITS_AFTERWARDS = ["named", "anonymous"] as const;
export type CreditAfterwards = (typeof CREDITS_AFTERWARDS)[number];

/** What stands where the name of an anonymous former member stood. */
export const FORMER_MEMBER = "a former member";
