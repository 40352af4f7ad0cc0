/**
 * Stable codes of everything the server refuses, `noun.reason`, each with the HTTP status it goes out with. The
 * client words them in the reader's language; `params` of a problem fill the gaps in that text.
 */
export const problems = {
  'request.malformed': 400,
  'request.origin': 403,
  'request.too_many': 429,
  'request.too_large': 413,
  'request.not_found': 404,
  'server.fault': 500,
  'server.database_away': 503,

  'session.missing': 401,
  'session.wrong_credentials': 401,
  'session.wrong_password': 403,
  'session.role': 403,
  'session.shop': 404,
  'session.switched': 409,

  'command.reused': 422,
  'command.stale': 409,

  'pin.wrong': 403,
  'pin.locked': 403,
  'pin.missing': 403,
  'pin.not_enrolled': 403,
  'pin.not_set': 403,
  'pin.taken_shape': 422,

  'setup.closed': 409,
  'setup.wrong_code': 403,

  'people.unknown': 404,
  'people.email_taken': 409,
  'people.last_manager': 409,
  'people.other_shop': 409,
  'devices.unknown': 404,

  'sites.unknown': 404,
  'sites.name_taken': 409,
  'texts.changed': 409,
  'texts.unreviewed': 409,
  'tableEdition.changed': 409,

  'links.unknown': 404,
  'links.expired': 410,

  'items.unknown': 404,
  'items.taken': 409,
  'items.state': 409,
  'items.held': 409,
  'items.code_taken': 409,
  'items.changed': 409,
  'items.reason': 422,
  'items.rack_place': 422,

  'labels.unknown': 404,
  'labels.taken': 409,
  'skis.not_on_rail': 422,

  'models.not_approved': 409,
  'models.name_taken': 409,
  'models.geometry': 422,
  'models.sheet_unfinished': 422,

  'forms.sent': 409,
  'rentals.unknown': 404,
  'rentals.taken': 409,
  'rentals.state': 409,
  'ownBoots.same_person': 409,
  'ownBoots.read_anew': 409,

  'renters.unfinished': 422,
  'renters.request_not_allowed': 422,
  'renters.unsigned': 422,
  'renters.guardian': 422,
  'renters.changed': 409,

  'fittings.open': 409,
  'fittings.stop': 422,
  'fittings.needs_decision': 422,
  'fittings.not_open': 409,
  'fittings.held_by': 409,
  'fittings.void': 409,
  'fittings.unread': 409,
  'fittings.mismatch': 422,
  'fittings.preset_moved': 409,
  'fittings.stands_there': 422,
  'fittings.nothing_to_decide': 422,
  'fittings.value_not_decidable': 422,
  'fittings.second_name': 422,

  'handOvers.changed': 409,
  'handOvers.guardian': 422,
  'handOvers.wrong_item': 409,
  'handOvers.sole_differs': 409,
  'handOvers.text': 409,
  'handOvers.done': 409,

  'returns.nothing_out': 409,
  'returns.side': 422,
  'inspections.fault_left': 422,
  'inspections.part_missing': 409,
  'inspections.rack_place': 422,
  'inspections.reason': 422,

  'quarantine.open': 409,
  'quarantine.release': 409,
  'quarantine.review_day': 422,

  'callBacks.unknown': 404,
  'callBacks.closed': 409,
  'callBacks.reason': 422,
  'records.unknown': 404,
  'records.not_on_rail': 422,
  'records.corrected': 409,
} as const satisfies Record<string, number>

export type ProblemCode = keyof typeof problems
export type ProblemParams = Record<string, string | number | boolean | null | (string | number)[]>

/** Problem details after RFC 9457, as they travel. `type` is `about:blank` plus our code in `code`. */
export interface ProblemDetails {
  type: string
  title: string
  status: number
  code: ProblemCode
  params: ProblemParams
  /** For malformed requests: where in the body, and which of zod's reasons. */
  issues?: { path: (string | number)[]; reason: string }[]
}
