/** Said wherever such a signature is shown. */
export const ownSignatureWords = 'Signed with the signer’s own key, outside this server';
export const ownSignatureLimit = 'It shows that the key’s holder approved this request, not what their screen showed.';
