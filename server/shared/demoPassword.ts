/**
 * The password of every demo account. It protects nothing: the accounts hold made-up data and are
 * listed, password and all, on the sign-in page of a server in demo mode, and made nowhere else.
 */
export const DEMO_PASSWORD = 'thirty pots on a shelf'
