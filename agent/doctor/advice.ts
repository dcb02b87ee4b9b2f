interface Advice {
  code: string;
  says: string;
  toDo: string;
}

/** Codes of Node's network and TLS, with what each means to a workshop. */
const CAUSES: readonly [RegExp, Advice][] = [
  [
    /^(DEPTH_ZERO_SELF_SIGNED_CERT|SELF_SIGNED_CERT_IN_CHAIN|UNABLE_TO_.*CERT.*|UNABLE_TO_VERIFY_LEAF_SIGNATURE)$/,
    {
      code: 'certificate-unknown',
      says: "The server's certificate is vouched for by nobody whom this computer knows.",
      toDo: 'Put the certificate of the workshop\'s own authority into a file and name it as "caFile".',
    },
  ],
  [
    /^CERT_(HAS_EXPIRED|NOT_YET_VALID)$/,
    {
      code: 'certificate-date',
      says: "The server's certificate is not valid today.",
      toDo: "Renew it at the server; look at this computer's date, too.",
    },
  ],
  [
    /^ERR_TLS_CERT_ALTNAME_INVALID$/,
    {
      code: 'certificate-name',
      says: "The server's certificate is for another name.",
      toDo: 'Write the name that stands in the certificate as "server".',
    },
  ],
  [
    /^(ENOTFOUND|EAI_AGAIN)$/,
    {
      code: 'server-unnamed',
      says: "The server's name is not known to the network.",
      toDo: 'Look at the spelling of "server" and at the network\'s name service.',
    },
  ],
];

/** What a failed call of the server means. @param address where it was called */
export function adviceOnCall(address: string, cause: unknown): Advice {
  const codes = codesOf(cause);
  const known = CAUSES.find(([pattern]) => codes.some((code) => pattern.test(code)));
  if (known) return known[1];
  return {
    code: 'server-away',
    says: `${address} does not answer${codes.length > 0 ? ` (${codes.join(', ')})` : ''}.`,
    toDo: 'See whether the server runs, and whether this computer is on its network.',
  };
}

/** The codes of an error and of what caused it, outermost first. */
function codesOf(error: unknown): string[] {
  if (!(error instanceof Error)) return [];
  const own = 'code' in error && typeof error.code === 'string' ? [error.code] : [];
  return [...own, ...codesOf(error.cause)];
}
