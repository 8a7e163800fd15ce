/** An issue's own name: programme code and four digits. */
export interface IssueName { programme: string; number: string }

export const addressOf = ({ programme, number }: IssueName): string => `/issues/${programme}/${number}`;
/** The parameters of the endpoints, without whatever else the object carries. */
export const named = ({ programme, number }: IssueName): IssueName => ({ programme, number });
