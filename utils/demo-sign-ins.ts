/** Who can sign in to the demonstration data. A browser test signs in as each. */
export const DEMO_PASSWORD = 'longpull-demo'

export const DEMO_SIGN_INS = [
  { email: 'owner@longpull.test', who: 'Owner of the shop' },
  { email: 'estimator@longpull.test', who: 'Estimator' },
  { email: 'technician@longpull.test', who: 'Technician' },
  { email: 'customer@longpull.test', who: 'Customer' },
  { email: 'owner@othershop.test', who: 'Owner of another shop' },
] as const
