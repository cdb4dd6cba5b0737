/**
 * Passwords refused because they are tried first: from memory, common practice, no source. Most
 * lists hold shorter ones; with twelve characters asked for, people lengthen these with digits, so
 * they are compared without digits and signs at either end, and with look-alike digits read as letters.
 */
const COMMON = new Set(
  `password passwort passphrase passwordpassword passwords mypassword yourpassword thepassword newpassword
  changeme changemenow pleasechangeme letmein letmeinnow letmeinplease pleaseletmein welcome welcomehome
  welcomeback welcometoschool iloveyou iloveyousomuch iloveyouforever ilovemyself ilovemyfamily ilovemymum
  ilovemymom ilovemydog ilovemycat ilovephysics ilovescience iloveschool ilovefootball ilovechocolate ilovegod
  sunshine sunshines princess princesses football footballer baseball basketball volleyball superman batman
  spiderman ironman starwars startrek pokemon minecraft fortnite harrypotter hogwarts gandalf naruto dragonball
  monkey dragon shadow master mastermaster killer trustno trustnoone whatever whateverwhatever nothing everything
  something anything secret secretsecret topsecret supersecret mysecret verysecret qwerty qwertyuiop qwertyuiopas
  qwertyqwerty qwertyasdfgh qwertzuiop azertyuiop asdfghjkl asdfghjklqwe asdfasdfasdf zxcvbnm zxcvbnmasdfg
  qazwsxedc qazwsxedcrfv qwerasdfzxcv abcdefg abcdefgh abcdefghij abcdefghijkl abcabcabcabc aaaaaaaaaaaa
  administrator administration admin adminadmin adminadminadmin rootroot rootrootroot superuser supervisor
  useruser useruseruser testtest testtesttest testing testaccount testpassword guestguest defaultpassword default
  computer computers internet internetexplorer microsoft windows google googlegoogle facebook instagram youtube
  whatsapp samsung iphone android linux ubuntu raspberry raspberrypi server serverserver databasedatabase
  teacher teacherteacher teachers headteacher student students studentstudent classroom classrooms school
  schoolschool schools myschool highschool university college collegecollege laboratory physics physicsphysics
  physicslab physicsteacher physicsclass chemistry biology mathematics maths science sciencescience scienceteacher
  sciencelab experiment experiments pendulum pendulums pendulumpendulum simplependulum swinging gravity
  gravitygravity galileo galileogalilei newton isaacnewton einstein alberteinstein eequalsmcsquared
  swaymark swaymarkswaymark coordinator volunteer volunteers correcthorsebatterystaple correcthorse
  summer summertime summerholiday winter wintertime spring springtime autumn holiday holidays christmas
  merrychristmas happybirthday happynewyear january february september october november december monday
  wednesday thursday saturday blackberry strawberry strawberries chocolate chocolates butterfly butterflies
  elephant elephants rainbow rainbows unicorn unicorns mountain mountains freedom friends friendship forever
  foreverandever beautiful goodmorning goodevening hello hellohello hellohellohello helloworld helloworldhello
  hellokitty thankyou thankyouverymuch liverpool manchester manchesterunited chelsea arsenal barcelona
  realmadrid juventus bayernmunich london newyork california australia england germany scotland america
  jesuschrist jesusisking godisgood blessed family myfamily mother father michael jennifer elizabeth alexander
  alexandra charlotte christopher stephanie jonathan`.split(/\s+/),
);

const ROWS = [
  '01234567890123456789',
  'abcdefghijklmnopqrstuvwxyz',
  'qwertyuiopasdfghjklzxcvbnm',
  '1qaz2wsx3edc4rfv5tgb',
];

/** True for a password that is on the list, repeats a few characters, or walks along a row of keys. */
export function isCommonPassword(password: string): boolean {
  const lower = password.toLowerCase();
  const bare = lower.replace(/^[^\p{L}]+|[^\p{L}]+$/gu, '');
  if ([lower, bare, asLetters(lower), asLetters(bare)].some((text) => COMMON.has(text))) return true;
  if (/^(.{1,4})\1+.{0,3}$/su.test(lower)) return true;
  return ROWS.some((row) => row.includes(lower) || reversed(row).includes(lower));
}

const LOOK_ALIKES: Record<string, string> = {
  '0': 'o',
  '1': 'i',
  '3': 'e',
  '4': 'a',
  '5': 's',
  '7': 't',
  '@': 'a',
  $: 's',
};
const asLetters = (text: string) => text.replace(/[013457@$]/g, (sign) => LOOK_ALIKES[sign]!).replace(/[^\p{L}]/gu, '');
const reversed = (text: string) => [...text].reverse().join('');
