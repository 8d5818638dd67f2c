import { useSuspenseQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import type { Deposit } from '#contract/deposits.ts';
import type { Endpoint } from '#contract/endpoint.ts';
import type { Role } from '#contract/roles.ts';
import { depositQuery } from './deposit-queries.ts';
import { ROLE_NAMES } from './stages.ts';

/** The deposit named by the address. Its layout has checked the number. */
export function useDepositId(): number {
  const id = Number(useParams()['depositId']);
  if (!Number.isSafeInteger(id)) throw new Error('Expected a page below /deposits/:depositId');
  return id;
}

/** The deposit in hand; read before its pages are shown. */
export const useDeposit = (): Deposit => useSuspenseQuery(depositQuery(useDepositId())).data;

const namesOf = (roles: readonly Role[]): string =>
  roles.map((role) => ROLE_NAMES[role].toLowerCase()).join(' or ');

/**
 * Why the person may not call an endpoint on this deposit, or undefined if they may. The server
 * decides; this only lets a button say so beforehand: `<Button unavailable={useRefusal(createDomain)}>`.
 */
export function useRefusal(endpoint: Pick<Endpoint, 'access'>): string | undefined {
  const { myRole } = useDeposit();
  const { access } = endpoint;
  if (access.kind !== 'deposit') return undefined;
  if (myRole && access.roles.includes(myRole)) return undefined;
  const yours = myRole ? `yours is ${ROLE_NAMES[myRole].toLowerCase()}` : 'you are no member';
  return `For ${namesOf(access.roles)}; ${yours}`;
}
