import type { Role, TokenRight } from '#contract/roles.ts';

/**
 * Who may call what, written by hand from the product's table of roles and kept apart from the
 * contract on purpose: a right changed there by mistake differs from the row here. Every endpoint
 * that is mounted needs a row.
 */
export type RightsRow = 'public' | 'signed-in' | 'administrator' | DepositRow;

interface DepositRow {
  roles: readonly Role[];
  /** Rights an API token may have to get in, given that its owner's role does. */
  tokens: readonly TokenRight[];
}

const ALL: readonly Role[] = [
  'lead',
  'geologist',
  'geometallurgist',
  'site-geologist',
  'estimator',
  'viewer',
];

/** Read by every member and by reading programs. */
const READ: RightsRow = { roles: ALL, tokens: ['read', 'work'] };
/** Written by those who analyse: lead and geologist. */
const ANALYSE: RightsRow = { roles: ['lead', 'geologist'], tokens: ['work'] };
/** Written by those who set limits: lead, geologist and geometallurgist. */
const GEOMET: RightsRow = { roles: ['lead', 'geologist', 'geometallurgist'], tokens: ['work'] };
/** Only the lead, and only at a page. */
const LEAD_AT_A_PAGE: RightsRow = { roles: ['lead'], tokens: [] };
const MEMBER_AT_A_PAGE: RightsRow = { roles: ALL, tokens: [] };
/** Every member reads by it, but it is a POST: a reading token does not send those. */
const READ_BY_POST: RightsRow = { roles: ALL, tokens: ['work'] };
/** Whatever a token reads, one for codes reads this. */
const CODES: RightsRow = { roles: ALL, tokens: ['read', 'codes', 'work'] };
/** Everybody but a viewer, who changes nothing. */
const NO_VIEWER: RightsRow = {
  roles: ['lead', 'geologist', 'geometallurgist', 'site-geologist', 'estimator'],
  tokens: ['work'],
};

export const RIGHTS: Readonly<Record<string, RightsRow>> = {
  getHealth: 'public',
  getReadiness: 'public',
  getOpenApi: 'public',
  readMailbox: 'public',

  getInstance: 'public',
  signIn: 'public',
  signOut: 'signed-in',
  getMe: 'signed-in',
  updateMe: 'signed-in',
  changePassword: 'signed-in',
  listSessions: 'signed-in',
  endSession: 'signed-in',
  askPasswordReset: 'public',
  resetPassword: 'public',
  getInvitation: 'public',
  acceptInvitation: 'public',

  listUsers: 'administrator',
  inviteUser: 'administrator',
  updateUser: 'administrator',
  listAllDeposits: 'administrator',
  resetDemo: 'administrator',

  listDeposits: 'signed-in',
  createDeposit: 'signed-in',
  getDeposit: READ,
  updateDeposit: { roles: ['lead'], tokens: ['work'] },

  listMembers: READ,
  inviteMember: LEAD_AT_A_PAGE,
  withdrawInvitation: LEAD_AT_A_PAGE,
  changeMemberRole: LEAD_AT_A_PAGE,
  removeMember: LEAD_AT_A_PAGE,

  listTokens: MEMBER_AT_A_PAGE,
  createToken: MEMBER_AT_A_PAGE,
  revokeToken: MEMBER_AT_A_PAGE,

  listAudit: READ,
  downloadAudit: READ,

  listJobs: READ,
  getJob: READ,
  cancelJob: NO_VIEWER,
  streamEvents: READ,

  getTable: READ,
  readColumn: READ,

  uploadFiles: ANALYSE,
  listUploads: READ,
  getUpload: READ,
  downloadUpload: READ,
  discardUpload: ANALYSE,
  saveMapping: ANALYSE,
  previewRows: READ_BY_POST,
  checkFile: ANALYSE,
  loadFile: ANALYSE,
  listProblems: READ,
  downloadProblems: READ,
  listRevisions: READ,
  useRevision: ANALYSE,
  listDemoFiles: 'signed-in',
  downloadDemoFile: 'signed-in',
  getSnapshot: READ,
  listHoles: READ,
  getHole: READ,

  listSuites: READ,
  createSuite: ANALYSE,
  updateSuite: ANALYSE,
  deleteSuite: ANALYSE,
  listComponentRuns: READ,
  getComponentRun: READ,
  startComponents: ANALYSE,
  listSweeps: READ,
  startSweep: ANALYSE,
  listGroupings: READ,
  getGrouping: READ,
  startGrouping: ANALYSE,
  useGrouping: ANALYSE,
  updateGroup: ANALYSE,
  listScreens: READ,
  getScreen: READ,
  getScreenCell: READ,
  startScreen: ANALYSE,
  listDomains: READ,
  createDomain: ANALYSE,
  updateDomain: ANALYSE,
  deleteDomain: ANALYSE,
  restoreDomain: ANALYSE,
  getEvidence: READ,
  gatherEvidence: ANALYSE,
  getZoneRules: READ,
  saveZoneRules: GEOMET,
  startZones: GEOMET,
  listZoneRuns: READ,
  listZones: READ,
  downloadZones: READ,

  listCodeSets: CODES,
  getCodeSet: CODES,
  downloadCodes: CODES,
  makeCodes: ANALYSE,
  verifyCodes: NO_VIEWER,

  getOverview: READ,
  listStages: READ,
};
