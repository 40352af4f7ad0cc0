/** First name and initial: what is called out, or stands on a list; empty once the person was erased. */
export const calledName = ({ firstName, lastName }: { firstName: string; lastName: string }) =>
  `${firstName} ${lastName ? `${[...lastName][0]}.` : ''}`.trim()
