/* Broken plans by the thousand: each is either a plan, which then writes and reads back to itself,
 * or has a fault. The seed is fixed, so a failure comes back. */
#include "plan-text.h"

#define SEED 20260
#define MUTATIONS_OF_SMALL 9700
#define MUTATIONS_OF_EXAMPLE 60 /* each of five */

static guint accepted, refused;

static void
try_text (const char *text, gsize length)
{
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  /* Exactly as many bytes as there are, so that a sanitizer sees a step beyond. */
  g_autofree char *bytes = g_memdup2 (text, MAX (length, 1));
  g_autoptr (UtPlan) plan = (UtPlan *)ut_plan_read (bytes, length, faults);
  g_assert_true ((plan == NULL) == (faults->len > 0));
  g_assert_cmpuint (faults->len, <=, UT_FAULTS_MOST);
  for (guint i = 0; i < faults->len; i++)
    {
      const UtFault *fault = faults->pdata[i];
      g_assert_true (g_utf8_validate (fault->path, -1, NULL)
                     && g_utf8_validate (fault->message, -1, NULL));
      g_assert_null (strpbrk (fault->path, "\n\r"));
      g_assert_null (strpbrk (fault->message, "\n\r"));
    }
  if (plan == NULL)
    {
      refused++;
      return;
    }
  accepted++;
  gsize n_once, n_twice;
  g_autofree char *once = ut_plan_write (plan, &n_once);
  g_autoptr (UtPlan) again = (UtPlan *)ut_plan_read (once, n_once, faults);
  g_assert_nonnull (again);
  g_autofree char *twice = ut_plan_write (again, &n_twice);
  g_assert_cmpmem (once, n_once, twice, n_twice);
}

static gsize
random_at (GRand *rand, gsize length)
{
  return length > 0 ? (gsize)g_rand_int_range (rand, 0, (gint32)length) : 0;
}

/* Where a token begins at or after a random place, and its length. */
static gsize
random_token (GRand *rand, const GString *text, gsize *length)
{
  static const char in_token[] = "abcdefghijklmnopqrstuvwxyz_-+.0123456789CSTW\"";
  gsize at = random_at (rand, text->len);
  while (at < text->len && (text->str[at] == '\0' || strchr (in_token, text->str[at]) == NULL))
    at++;
  for (*length = 0; at + *length < text->len && text->str[at + *length] != '\0'
                    && strchr (in_token, text->str[at + *length]) != NULL;)
    (*length)++;
  return at;
}

static const char *const odd_values[] = { "1e999",
                                          "-1e999",
                                          "1e-999",
                                          "-0",
                                          "0",
                                          "9007199254740993",
                                          "-1",
                                          "1.5",
                                          "null",
                                          "true",
                                          "[]",
                                          "{}",
                                          "\"\"",
                                          "\"C1\"",
                                          "\"S1\"",
                                          "\"isotropic\"",
                                          "1e308",
                                          "400",
                                          "401",
                                          "\"\\ud800\"",
                                          "\"\\u0000\"",
                                          "[[0,0],[1,1]]",
                                          "{\"a\":[1e999]}" };

static void
mutate (GRand *rand, GString *text)
{
  gsize n, m, at = random_at (rand, text->len), to;
  g_autofree char *piece = NULL;
  switch (g_rand_int_range (rand, 0, 9))
    {
    case 0: /* a bit */
      if (text->len > 0)
        text->str[at] ^= (char)(1 << g_rand_int_range (rand, 0, 8));
      break;
    case 1: /* a stretch gone */
      n = (gsize)g_rand_int_range (rand, 1, 40);
      g_string_erase (text, (gssize)at, (gssize)MIN (text->len - at, n));
      break;
    case 2: /* a stretch twice */
      n = (gsize)g_rand_int_range (rand, 1, 200);
      piece = g_strndup (text->str + at, MIN (text->len - at, n));
      g_string_insert (text, (gssize)at, piece);
      break;
    case 3: /* one token over another */
      at = random_token (rand, text, &n);
      to = random_token (rand, text, &m);
      piece = g_strndup (text->str + at, n);
      g_string_erase (text, (gssize)to, (gssize)m);
      g_string_insert (text, (gssize)to, piece);
      break;
    case 4: /* a token becomes an odd value */
    case 5:
    case 6:
      at = random_token (rand, text, &n);
      if (text->len > at + n && text->str[at + n] == ':')
        break; /* a key: the value behind it is the better target */
      g_string_erase (text, (gssize)at, (gssize)n);
      g_string_insert (
          text, (gssize)at, odd_values[g_rand_int_range (rand, 0, G_N_ELEMENTS (odd_values))]);
      break;
    case 7: /* deep nesting */
      n = (gsize)g_rand_int_range (rand, 1, 100);
      for (gsize i = 0; i < n; i++)
        g_string_insert_c (text, (gssize)at, '[');
      break;
    default: /* the end gone */
      g_string_truncate (text, at);
      break;
    }
}

static void
fuzz (GRand *rand, const char *start, guint times)
{
  for (guint i = 0; i < times; i++)
    {
      g_autoptr (GString) text = g_string_new (start);
      for (int n = g_rand_int_range (rand, 1, 4); n > 0; n--)
        mutate (rand, text);
      try_text (text->str, text->len);
    }
}

static void
test_fuzz (void)
{
  static const char *const examples[]
      = { "clinic-one-channel", "clinic-two-channels", "cold-store", "farm-loud-radios", "farm" };
  g_autoptr (GRand) rand = g_rand_new_with_seed (SEED);
  fuzz (rand, small_plan, MUTATIONS_OF_SMALL);
  for (guint i = 0; i < G_N_ELEMENTS (examples); i++)
    {
      g_autofree char *file = g_strdup_printf ("%s.undertone", examples[i]);
      g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), file, NULL);
      g_autofree char *text = NULL;
      g_assert_true (g_file_get_contents (path, &text, NULL, NULL));
      fuzz (rand, text, MUTATIONS_OF_EXAMPLE);
    }
  g_test_message ("%u accepted, %u refused", accepted, refused);
  g_assert_cmpuint (accepted + refused, ==, 10000);
  /* Neither side is hardly tried. */
  g_assert_cmpuint (accepted, >, 300);
  g_assert_cmpuint (refused, >, 3000);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/plan-fuzz/mutations", test_fuzz);
  return g_test_run ();
}
