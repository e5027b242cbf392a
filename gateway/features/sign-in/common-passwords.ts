/**
 * Passwords and the words people make them from, in small letters and without what is put around them ("Password123!" counts as
 * "password"). A short list of our own from common practice, no source; it is no breach list.
 */
export const COMMON_PASSWORDS: ReadonlySet<string> = new Set(
  `password passwort passw pass passphrase passcode secret geheim letmein welcome willkommen login logon signin admin
  administrator root user username guest test testing tester default changeme changeit temp temporary qwerty qwertz azerty
  qwertyuiop qwertzuiop asdfghjkl asdf asdfgh zxcvbnm zxcvbn yxcvbnm qazwsx qazwsxedc zaqwsx wasd iloveyou ilove loveyou love
  lovely sunshine princess dragon monkey football baseball basketball soccer hockey superman batman spiderman starwars
  pokemon master shadow michael jordan jennifer jessica ashley charlie daniel thomas andrew robert matthew joshua anthony
  george william maria anna laura martin alexander nicole hunter ranger buster killer tigger trustno trustnoone whatever
  freedom flower hello helloworld hallo computer internet google facebook android iphone samsung apple orange banana
  cheese chocolate cookie coffee summer winter spring autumn sommer monday friday sunday january february march april june
  july august september october november december london berlin paris lisbon lisboa madrid america england deutschland
  access abcdef abcdefg abcdefgh abcd abc aaaaaa nothing blink heaven angel angels jesus christ god family mother father
  baby babygirl lucky diamond silver golden purple yellow silence thunder phoenix eagle falcon tiger lion panther wolf
  merlin mustang harley corvette ferrari porsche mercedes yamaha liverpool chelsea arsenal barcelona madridista juventus
  ninja samurai pepper ginger maggie bailey sophie chelsea mickey minnie snoopy garfield matrix gandalf hobbit potter
  harrypotter minecraft fortnite gamer player pussy fuck fuckyou fuckoff asshole bitch money dollar bitcoin business office
  company work server system oracle mysql database backup security secure private public service support manager
  correcthorsebatterystaple candle candles candlemaker wax soywax beeswax wick fragrance vanilla lavender studio curing
  cure curetime kerze kerzen vela velas bougie temperature sensor mosquitto mqtt`.split(/\s+/),
);

/** Rows of keys and plain sequences; a password that only walks along one of them is no secret. */
export const RUNS: readonly string[] = [
  '01234567890123456789',
  'abcdefghijklmnopqrstuvwxyz',
  'qwertyuiop',
  'asdfghjkl',
  'zxcvbnm',
  'qwertzuiop',
  'yxcvbnm',
  'azertyuiop',
  'qsdfghjklm',
  'wxcvbn',
  '1qaz2wsx3edc4rfv5tgb6yhn7ujm',
  '1q2w3e4r5t6z7u8i9o0p',
  '1q2w3e4r5t6y7u8i9o0p',
];
