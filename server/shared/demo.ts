/** The password of every account that the demo makes; listed on the sign-in page in demo mode only. */
export const DEMO_PASSWORD = 'blue-and-white-ware'
