/** What an access token may be made for. A door names the one scope, if any, that opens it to tokens. */
export const accessScopes = ['readings:write'] as const;

export type AccessScope = (typeof accessScopes)[number];

const words: Record<AccessScope, string> = {
  'readings:write': 'Send readings and sweeps into your own open runs',
};

/** What a scope lets a script do, for the person who makes the token. */
export function scopeInWords(scope: AccessScope): string {
  return words[scope];
}

/** The scopes of a kept list that this program knows; one that it has dropped opens nothing. */
export function knownScopes(kept: readonly string[]): AccessScope[] {
  return accessScopes.filter((scope) => kept.includes(scope));
}
