/** Whoever answers RFC 3161 requests. */
export interface TimeStampAuthority {
  /** Kept with every token and every job; never changes for one authority. */
  name: string;
  /** The installation's own test authority: its stamps are not independent. */
  isOwn: boolean;
  /** DER of a TimeStampReq in, DER of a TimeStampResp out. Throws with a sentence if there is no answer. */
  stamp(request: Uint8Array): Promise<Uint8Array>;
}
