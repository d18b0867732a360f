/** The address that a phone dials (RFC 3966): of a number as people write it, the digits and a leading plus. */
export const dialling = (phone: string): string => `tel:${phone.replace(/[^\d+]/g, '')}`;
