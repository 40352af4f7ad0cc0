/** In what relation a guardian or leader stands to a minor, as the form asks for it. */
export const guardianRelations = ['parent', 'grandparent', 'legal_guardian', 'group_leader', 'other'] as const
export type GuardianRelation = (typeof guardianRelations)[number]
