/** What a redshift is tried as: narrow lines, a quasar's broad lines, or an asymmetric Lyman-alpha line. */
export type SuspectKind = 'narrow' | 'broad' | 'lyman';
