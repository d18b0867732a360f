/** Addresses of what the page of a copy fetches. */
export type CopyPageFiles = {
  style: string;
  icon: string;
  script: string;
  /** Of the weights in the first screen. */
  fonts: readonly string[];
};

/** Why there is no copy to show. */
export type CopyFailure = 'link-unknown' | 'link-expired' | 'link-revoked' | 'away';
