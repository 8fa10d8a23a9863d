#include "words.h"

static const char *const verdict_words[] = {
  [UT_VERDICT_MET] = "met",
  [UT_VERDICT_NOISE_LIMITED] = "noise-limited",
  [UT_VERDICT_LEVEL_LIMITED] = "level-limited",
  [UT_VERDICT_INTERFERENCE_LIMITED] = "interference-limited",
  [UT_VERDICT_POWER_LIMITED] = "power-limited",
  [UT_VERDICT_MINIMUM_LIMITED] = "minimum-limited",
  [UT_VERDICT_STEP_LIMITED] = "step-limited",
};

static const char *const aim_words[] = {
  [UT_AIM_LEAST_POWER] = "least-power",
  [UT_AIM_EQUAL_MARGIN] = "equal-margin",
  [UT_AIM_FEWEST_DROPPED] = "fewest-dropped",
  [UT_AIM_AS_SET] = "as-set",
};

static const char *const direction_words[] = {
  [UT_DIRECTION_DOWN] = "down",
  [UT_DIRECTION_UP] = "up",
};

static const char *const fallback_words[] = {
  [UT_FALLBACK_NONE] = NULL,
  [UT_FALLBACK_EQUAL_MARGIN] = "equal-margin",
  [UT_FALLBACK_CLIPPED_STEPS] = "clipped-steps",
};

const char *
ut_verdict_word (UtVerdict verdict)
{
  return verdict_words[verdict];
}

const char *
ut_aim_word (UtAim aim)
{
  return aim_words[aim];
}

const char *
ut_direction_word (UtDirection direction)
{
  return direction_words[direction];
}

const char *
ut_fallback_word (UtFallback fallback)
{
  return fallback_words[fallback];
}

static int
find_word (const char *const *words, gsize n, const char *word)
{
  for (gsize i = 0; i < n; i++)
    if (g_strcmp0 (words[i], word) == 0)
      return (int) i;
  return -1;
}

gboolean
ut_aim_from_word (const char *word, UtAim *aim)
{
  int found = find_word (aim_words, G_N_ELEMENTS (aim_words), word);

  if (found < 0)
    return FALSE;
  *aim = (UtAim) found;
  return TRUE;
}

gboolean
ut_direction_from_word (const char *word, UtDirection *direction)
{
  int found = find_word (direction_words, G_N_ELEMENTS (direction_words), word);

  if (found < 0)
    return FALSE;
  *direction = (UtDirection) found;
  return TRUE;
}
