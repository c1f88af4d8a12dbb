/** What whoever signs off must have done, in the words that are shown, ticked and stored with the version. */
export const SIGN_OFF_TICKS = {
  derivation: 'I followed the derivation of each formula',
  hazards: 'I looked at the hazards and their cautions',
};
