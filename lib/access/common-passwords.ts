/** Passwords that are guessed first, of eight characters or more; compared in lower case. */
const WORDS = `password password1 password12 password123 password1234 passw0rd p@ssw0rd p@ssword pa$$word passwort contrasena motdepasse
12345678 123456789 1234567890 0123456789 9876543210 87654321 987654321 11111111 00000000 88888888 12341234 11223344 12121212 123123123 123321123 147258369
qwertyui qwertyuiop qwerty12 qwerty123 qwerty1234 qwertz123 azertyui azertyuiop asdfghjk asdfghjkl zxcvbnm1 zxcvbnm123 1q2w3e4r 1q2w3e4r5t 1qaz2wsx q1w2e3r4 zaq12wsx qazwsxedc
abcd1234 abc12345 abcdefgh abcdefghi a1b2c3d4 aaaaaaaa aa123456 a12345678 letmein1 letmein123 letmeinnow welcome1 welcome12 welcome123 welcome2 changeme changeme1 changeme123
iloveyou iloveyou1 sunshine sunshine1 princess princess1 football football1 baseball baseball1 basketball superman batman123 spiderman pokemon1 starwars starwars1 dragon123 monkey123
michael1 jennifer jonathan jordan23 charlie1 michelle samantha victoria computer computer1 internet internet1 security secret123 secretpw administrator admin123 admin1234 adminadmin administrator1 rootroot toortoor
master123 mustang1 trustno1 whatever whatever1 freedom1 shadow123 qwe12345 qweasdzxc asdf1234 asdfasdf test1234 testtest testing1 guest123 default1 temp1234 temppass login123 hello123 hellohello
summer2020 summer2021 summer2022 summer2023 summer2024 summer2025 winter2020 winter2021 winter2022 winter2023 winter2024 winter2025 spring2024 autumn2024 january1 monday01
laboratory physics1 physics123 spectrum1 spectroscopy spectrometer magnetic zeeman123 lodeterm lodeterm1 lodeterm123 atomic123`

const COMMON: ReadonlySet<string> = new Set(WORDS.split(/\s+/))

const SEQUENCES = ['abcdefghijklmnopqrstuvwxyz', '01234567890123456789', 'qwertyuiopasdfghjklzxcvbnm']

/** Whether a password is one of those that are tried first: listed, one character or a pair over and over, or a plain sequence. */
export function isCommonPassword(password: string): boolean {
  const lower = password.toLowerCase()
  if (COMMON.has(lower) || /^(.{1,2})\1+.?$/su.test(lower)) return true
  return SEQUENCES.some((sequence) => sequence.includes(lower) || [...sequence].reverse().join('').includes(lower))
}
