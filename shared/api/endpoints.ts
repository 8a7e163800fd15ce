import { z } from 'zod';
import * as decodes from './decodes.js';
import * as files from './files.js';
import * as issues from './issues.js';
import * as links from './links.js';
import * as overview from './overview.js';
import * as people from './people.js';
import * as thread from './thread.js';
import { id } from './common.js';

/** A reply without a body. */
export const nothing = z.undefined();
const made = z.object({ id });

/**
 * Every JSON endpoint: method, path, what it takes, what it answers. The server mounts from this
 * table and the browser calls through it, so a path or a shape is written once. Streams (downloads,
 * events, CSV) and sign-in stand beside it: GET /api/files/:fileId/content, GET /api/events,
 * GET /api/issues/export, /api/auth/*.
 */
export const ENDPOINTS = {
  readMe: { method: 'GET', path: '/api/me', reply: people.me },
  changeMe: { method: 'PATCH', path: '/api/me', body: people.changeMe, reply: people.me },
  listMySessions: { method: 'GET', path: '/api/me/sessions', reply: people.mySessions },
  endMySession: { method: 'DELETE', path: '/api/me/sessions/:sessionId', reply: nothing },

  readDaySheet: { method: 'GET', path: '/api/day-sheet', reply: overview.daySheet },
  markDaySheetRead: { method: 'POST', path: '/api/day-sheet/looks', reply: nothing },
  readOverview: { method: 'GET', path: '/api/programmes/:programme/overview', reply: overview.overview },
  find: { method: 'GET', path: '/api/search', query: z.object({ q: z.string().trim().min(1).max(200) }), reply: overview.found },

  listIssues: { method: 'GET', path: '/api/issues', query: issues.registerQuery, reply: issues.registerPage },
  countIssues: { method: 'GET', path: '/api/issues/counts', query: issues.registerFilter, reply: issues.registerCounts },
  fileIssue: { method: 'POST', path: '/api/issues', body: issues.newIssue, reply: issues.filedIssue },
  readIssue: { method: 'GET', path: '/api/issues/:programme/:number', reply: issues.issue },
  changeIssue: { method: 'PATCH', path: '/api/issues/:programme/:number', body: issues.changeIssue, reply: issues.issue },
  moveIssue: { method: 'POST', path: '/api/issues/:programme/:number/moves', body: issues.newMove, reply: issues.issue },
  setNextMove: { method: 'POST', path: '/api/issues/:programme/:number/next-moves', body: issues.newNextMove, reply: issues.issue },
  recordRetest: { method: 'POST', path: '/api/issues/:programme/:number/retests', body: issues.newRetest, reply: issues.issue },
  signWaiver: { method: 'POST', path: '/api/issues/:programme/:number/waivers/:waiverId/signatures', reply: issues.issue },
  shareIssue: { method: 'POST', path: '/api/issues/:programme/:number/shares', body: issues.shareIssue, reply: issues.issue },
  follow: { method: 'PUT', path: '/api/issues/:programme/:number/following', reply: nothing },
  unfollow: { method: 'DELETE', path: '/api/issues/:programme/:number/following', reply: nothing },
  lookAtIssue: { method: 'POST', path: '/api/issues/:programme/:number/looks', reply: nothing },
  attachFiles: { method: 'POST', path: '/api/issues/:programme/:number/files', body: z.object({ fileIds: z.array(id).min(1).max(50) }), reply: issues.issue },

  listEntries: { method: 'GET', path: '/api/issues/:programme/:number/entries', reply: thread.entries },
  writeEntry: { method: 'POST', path: '/api/issues/:programme/:number/entries', body: thread.newEntry, reply: thread.entry },
  changeEntry: { method: 'PATCH', path: '/api/issues/:programme/:number/entries/:entryId', body: thread.changeEntry, reply: thread.entry },
  withdrawEntry: { method: 'DELETE', path: '/api/issues/:programme/:number/entries/:entryId', reply: nothing },
  listEntryVersions: { method: 'GET', path: '/api/issues/:programme/:number/entries/:entryId/versions', reply: thread.entryVersions },
  readHistory: { method: 'GET', path: '/api/issues/:programme/:number/history', reply: thread.history },

  requestDecode: { method: 'POST', path: '/api/issues/:programme/:number/decodes', body: decodes.newDecode, reply: decodes.decodeSummary },
  readDecode: { method: 'GET', path: '/api/decodes/:decodeId', reply: decodes.decode },
  judgeHint: { method: 'POST', path: '/api/hints/:hintId/verdicts', body: decodes.newHintVerdict, reply: nothing },

  /**
   * `multipart` is the query string of an upload; the body is multipart with one part named `file`.
   * What the file is for is in the address, so that it is decided before the first byte is taken.
   */
  uploadCapture: { method: 'POST', path: '/api/captures', multipart: files.uploadFields, reply: files.storedFile },
  uploadSnapshot: { method: 'POST', path: '/api/snapshots', multipart: files.uploadFields, reply: files.storedFile },
  uploadGlossary: { method: 'POST', path: '/api/glossaries', multipart: files.uploadFields, reply: files.storedFile },
  uploadAttachment: { method: 'POST', path: '/api/attachments', multipart: files.uploadFields, reply: files.storedFile },
  readFile: { method: 'GET', path: '/api/files/:fileId', reply: files.storedFile },
  changeFile: { method: 'PATCH', path: '/api/files/:fileId', body: files.changeFile, reply: files.storedFile },
  withdrawFile: { method: 'DELETE', path: '/api/files/:fileId', reply: nothing },

  listLinks: { method: 'GET', path: '/api/links', query: z.object({ programme: z.string().optional() }), reply: links.links },
  readLink: { method: 'GET', path: '/api/links/:linkId', reply: links.linkDetail },
  addLink: { method: 'POST', path: '/api/links', body: links.newLink, reply: made },
  listUnits: { method: 'GET', path: '/api/units', query: z.object({ programme: z.string().optional() }), reply: links.units },
  addUnit: { method: 'POST', path: '/api/units', body: links.newUnit, reply: made },
  addBuild: { method: 'POST', path: '/api/builds', body: links.newBuild, reply: links.build },

  readProgramme: { method: 'GET', path: '/api/programmes/:programme', reply: people.programme },
  addParty: { method: 'POST', path: '/api/programmes/:programme/parties', body: people.newParty, reply: made },
  invite: { method: 'POST', path: '/api/programmes/:programme/invitations', body: people.newInvitation, reply: people.madeInvitation },
  revokeInvitation: { method: 'DELETE', path: '/api/programmes/:programme/invitations/:invitationId', reply: nothing },
  changeMembership: { method: 'PATCH', path: '/api/programmes/:programme/memberships/:membershipId', body: people.changeMembership, reply: nothing },
  readAudit: { method: 'GET', path: '/api/programmes/:programme/audit', query: people.auditQuery, reply: people.auditPage },

  listViews: { method: 'GET', path: '/api/views', reply: overview.savedViews },
  keepView: { method: 'POST', path: '/api/views', body: overview.newSavedView, reply: overview.savedView },
  dropView: { method: 'DELETE', path: '/api/views/:viewId', reply: nothing },
} as const;
export type EndpointName = keyof typeof ENDPOINTS;
