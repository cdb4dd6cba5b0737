/** Joined emoji, skin tones, flags of parts of countries, keycaps: here a sign that cannot be seen alone has its place. */
const EMOJI =
  /(?:\u{1F3F4}[\u{E0020}-\u{E007E}]+\u{E007F}|[0-9#*]\uFE0F?\u20E3|\p{Extended_Pictographic}[\uFE0E\uFE0F]?\p{Emoji_Modifier}?(?:\u200D\p{Extended_Pictographic}\uFE0F?\p{Emoji_Modifier}?)*)/gu;
/** Format signs, fillers and what fonts leave out; the empty Braille pattern is drawn as nothing. */
const INVISIBLE = /[\p{Cf}\p{Default_Ignorable_Code_Point}\u2800]/gu;

/** True when a text holds a sign nobody can see, so that two texts can look alike and differ. */
export const hasInvisibleSigns = (text: string) => text.replace(EMOJI, '').search(INVISIBLE) >= 0;

export const withoutInvisibleSigns = (text: string) => text.replace(INVISIBLE, '');
