/** People of the demo who can sign in; their passwords are no secrets: the demo listens on this machine only. */
export const DEMO_SIGN_INS = [
  { email: 'marit@larkrise.example', password: 'wax-and-patience', what: 'owner of all studios' },
  { email: 'ines@larkrise.example', password: 'wax-and-patience', what: 'lead of Quay Street' },
  {
    email: 'tomas@larkrise.example',
    password: 'wax-and-patience',
    what: 'maker in Quay Street and High Barn',
  },
  { email: 'dispatch@larkrise.example', password: 'wax-and-patience', what: 'viewer of Quay Street' },
] as const;
