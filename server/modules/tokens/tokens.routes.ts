import { Router } from 'express';
import { createToken, listTokens, revokeToken } from '#contract/deposits.ts';
import { mount } from '#server/lib/mount.ts';
import type { TokensService } from './tokens.service.ts';

/** A token that could make or revoke tokens would outlive its own end. */
const sessionOnly = { sessionOnly: true };

export function tokensRoutes(tokens: TokensService): Router {
  const router = Router();
  mount(router, listTokens, ({ member, actor }) => tokens.list(member, actor), sessionOnly);
  mount(
    router,
    createToken,
    ({ member, body, actor }) => tokens.create(member, body, actor),
    sessionOnly,
  );
  mount(
    router,
    revokeToken,
    async ({ member, params, actor }) => {
      await tokens.revoke(member, params.tokenId, actor);
      return { done: true } as const;
    },
    sessionOnly,
  );
  return router;
}
