import type { Role, TokenRight } from '#contract/roles.ts';

/** A person as others see them. */
export interface Person {
  id: number;
  name: string;
}

/** Who is calling: a person by their session, or a person's API token bound to one deposit. */
export interface Actor extends Person {
  email: string;
  isAdministrator: boolean;
  via:
    | { kind: 'session'; sessionId: string }
    | { kind: 'token'; tokenId: number; depositId: number; right: TokenRight };
}

/** The caller's standing on the deposit of the request. */
export interface Member {
  depositId: number;
  role: Role;
}
