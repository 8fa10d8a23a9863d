/* The same plan gives the same bytes; what was read comes back in its order, with what is not ours.
 */
#include <float.h>
#include <math.h>

#include "plan-text.h"

static const char *const examples[]
    = { "clinic-one-channel", "clinic-two-channels", "cold-store", "farm-loud-radios", "farm" };

static char *
example_text (const char *name)
{
  g_autofree char *file = g_strdup_printf ("%s.undertone", name);
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), file, NULL);
  g_autoptr (GError) error = NULL;
  char *text = NULL;
  g_file_get_contents (path, &text, NULL, &error);
  g_assert_no_error (error);
  return text;
}

static void
assert_comes_back (const char *text)
{
  g_autoptr (UtPlan) plan = (UtPlan *)read_valid (text);
  g_autofree char *again = written (plan);
  g_assert_cmpstr (again, ==, text);
}

static void
test_examples (void)
{
  for (guint i = 0; i < G_N_ELEMENTS (examples); i++)
    {
      g_autofree char *text = example_text (examples[i]);
      g_test_message ("%s", examples[i]);
      assert_comes_back (text);
    }
}

static void
test_small_plan (void)
{
  assert_comes_back (small_plan);
}

/* Whatever a file looked like, what is written is read to the same plan and written the same. */
static void
assert_settles (const char *text, const char *expected)
{
  g_autoptr (UtPlan) plan = (UtPlan *)read_valid (text);
  g_autofree char *once = written (plan);
  g_assert_nonnull (strstr (once, expected));
  assert_comes_back (once);
}

static void
test_unknown_keys (void)
{
  static const struct
  {
    const char *from, *to;
  } cases[] = {
    { "  \"undertone\": 1",
      "  \"colour\": \"red\",\n  \"undertone\": 1,\n  \"later\": {\n    \"b\": [1, null, true, "
      "\"x\"],\n    \"a\": [\n      {},\n      []\n    ]\n  }" },
    { "\"sharing\": \"orthogonal\"", "\"sharing\": \"orthogonal\",\n    \"ours\": 1" },
    { "    \"base\": {", "    \"ours\": 0.1,\n    \"base\": {" },
    { "\"law\": \"log-distance\"", "\"ours\": -5,\n      \"law\": \"log-distance\"" },
    { "\"id\": \"block\"", "\"id\": \"block\",\n      \"ours\": null" },
    { "\"material\": \"concrete\"", "\"ours\": [],\n          \"material\": \"concrete\"" },
    { "\"elevation_m\": 0", "\"ours\": {},\n      \"elevation_m\": 0" },
    { "\"id\": \"W1\"", "\"id\": \"W1\",\n          \"ours\": 1e300" },
    { "\"at_m\": 3", "\"at_m\": 3,\n              \"ours\": false" },
    { "\"pattern\": \"sector\"", "\"pattern\": \"sector\",\n      \"ours\": \"\\u0001\\\\ \\\"\"" },
    { "\"id\": \"C1\"", "\"id\": \"C1\",\n      \"ours\": 9007199254740992" },
    { "\"id\": \"T1\"",
      "\"id\": \"T1\",\n      \"fields\": {\n        \"cable tag\": \"A-07\",\n        \"a\": "
      "5e-324\n      }" },
  };
  for (guint i = 0; i < G_N_ELEMENTS (cases); i++)
    {
      g_autofree char *text = replaced (small_plan, cases[i].from, cases[i].to);
      assert_comes_back (text);
    }
}

/* Keys in the order read, not in the contract's; values normalised. */
static void
test_order_and_values (void)
{
  static const struct
  {
    const char *from, *to, *expected;
  } cases[] = {
    { "\"x_m\": 5,\n      \"y_m\": 8",
      "\"y_m\": 8, \"x_m\": 5",
      "      \"y_m\": 8,\n      \"x_m\": 5,\n" },
    { "\"x_m\": 5", "\"x_m\": -0.0", "\"x_m\": 0," },
    { "\"x_m\": 5", "\"x_m\": 5.10e1", "\"x_m\": 51," },
    { "\"x_m\": 5", "\"x_m\": 0.1000", "\"x_m\": 0.1," },
    { "\"undertone\": 1",
      "\"undertone\": 1, \"n\": [-0, -0.0, 1.50, 1E5, 1e21, 9007199254740993.0, 1e16]",
      "\"n\": [0, 0, 1.5, 100000, 1e21, 9007199254740992, 1e16]" },
    { "\"undertone\": 1",
      "\"undertone\": 1, \"title\": \"\\u00e9\\/\\u0009\\u001f\\ud83d\\ude00\"",
      "\"title\": \"\xc3\xa9/\\t\\u001f\xf0\x9f\x98\x80\"" },
    { "\"id\": \"T1\"",
      "\"id\": \"T1\", \"name\": \"T1\", \"on\": true",
      "\"name\": \"T1\",\n      \"on\": true" },
    { "\"id\": \"S1\"",
      "\"id\": \"S1\", \"backdrop\": {\"data\": \"iVBORw==\", \"media_type\": \"image/png\", "
      "\"width_m\": 40, \"height_m\": 20}",
      "\"data\": \"iVBORw==\",\n        \"media_type\": \"image/png\",\n        \"width_m\": 40" },
    { "\"concrete\"",
      "{\"conductivity_s_m\": 0.02, \"relative_permittivity\": 2.6, \"of\": \"us\"}",
      "\"conductivity_s_m\": 0.02,\n            \"relative_permittivity\": 2.6,\n            "
      "\"of\": \"us\"" },
    { "\"pattern\": \"sector\"",
      "\"pattern\": \"isotropic\"",
      "\"beamwidth_v_deg\": 60" }, /* kept although not used */
  };
  for (guint i = 0; i < G_N_ELEMENTS (cases); i++)
    {
      g_autofree char *text = replaced (small_plan, cases[i].from, cases[i].to);
      g_test_message ("case %u", i);
      assert_settles (text, cases[i].expected);
    }
}

static void
test_numbers (void)
{
  static const struct
  {
    double value;
    const char *text;
  } cases[] = {
    { 0, "0" },
    { -0.0, "0" },
    { 1, "1" },
    { -1, "-1" },
    { 0.1, "0.1" },
    { -78.2, "-78.2" },
    { 0.1 + 0.2, "0.30000000000000004" },
    { 1.0 / 3, "0.3333333333333333" },
    { 100, "100" },
    { 868.3, "868.3" },
    { 1e-6, "0.000001" },
    { 1.5e-6, "0.0000015" },
    { 1e-7, "1e-7" },
    { -1.25e-7, "-1.25e-7" },
    { 5e-324, "5e-324" },
    { DBL_MIN, "2.2250738585072014e-308" },
    { DBL_MAX, "1.7976931348623157e308" },
    { 9007199254740992.0, "9007199254740992" },
    { 9007199254740994.0, "9.007199254740994e15" },
    { 123456789012345680.0, "1.2345678901234568e17" },
    { 1e16, "1e16" },
    { 1e21, "1e21" },
    { 1e22, "1e22" },
    { 1e23, "1e23" },
    { 9.5367431640625e-07, "9.5367431640625e-7" },
    { 0x1p-1017, "7.120236347223045e-307" }, /* the nearest decimal of 16 digits does not read back,
                                                this one does */
  };
  char buffer[G_ASCII_DTOSTR_BUF_SIZE];
  for (guint i = 0; i < G_N_ELEMENTS (cases); i++)
    g_assert_cmpstr (ut_number_text (cases[i].value, buffer), ==, cases[i].text);
}

static void
test_random_numbers (void)
{
  char buffer[G_ASCII_DTOSTR_BUF_SIZE];
  for (guint i = 0; i < 30000; i++)
    {
      union
      {
        guint32 words[2];
        double value;
      } random = { .words = { g_test_rand_int (), g_test_rand_int () } };
      if (!isfinite (random.value))
        continue;
      ut_number_text (random.value, buffer);
      g_assert_true (g_ascii_strtod (buffer, NULL) == random.value);
      g_assert_cmpuint (strlen (buffer), <=, 25);
    }
}

/* A plan made by the program shows all of its keys, in the contract's order. */
static void
test_new_plan (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *)ut_plan_new_empty ();
  g_autofree char *text = written (plan);
  assert_comes_back (text);
  static const char *const keys[] = { "undertone",
                                      "title",
                                      "client",
                                      "prepared_by",
                                      "revision",
                                      "date",
                                      "notes",
                                      "site",
                                      "north_deg",
                                      "latitude",
                                      "longitude",
                                      "datum",
                                      "carrier",
                                      "frequency_mhz",
                                      "bandwidth_mhz",
                                      "sharing",
                                      "processing_gain_db",
                                      "downlink_orthogonality",
                                      "channels",
                                      "channel_isolation_db",
                                      "polarization",
                                      "noise_temperature_k",
                                      "margin_db\": 3",
                                      "eirp_limit_dbm\": null",
                                      "resource_blocks\": null",
                                      "propagation",
                                      "base",
                                      "law\": \"free-space",
                                      "walls\": true",
                                      "wall_loss_limit_db",
                                      "excess_loss_limit_db",
                                      "slab\": \"averaged",
                                      "shadowing_db",
                                      "correlation_m",
                                      "constructions\": []",
                                      "storeys",
                                      "id\": \"S1",
                                      "name",
                                      "elevation_m",
                                      "height_m",
                                      "floor\": null",
                                      "walls\": []",
                                      "backdrop\": null",
                                      "antennas",
                                      "cells",
                                      "terminals",
                                      "measured_gains_db\": {}" };
  const char *at = text;
  for (guint i = 0; i < G_N_ELEMENTS (keys); i++)
    {
      g_autofree char *key = g_strconcat ("\"", keys[i], NULL);
      g_test_message ("%s", key);
      at = strstr (at, key);
      g_assert_nonnull (at);
      at += strlen (key);
    }
  g_assert_null (strstr (text, "exponent")); /* of another law */
}

static void
test_fingerprint (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *)read_valid (small_plan);
  g_autofree char *digest = g_compute_checksum_for_string (G_CHECKSUM_SHA256, small_plan, -1);
  g_autofree char *fingerprint = ut_plan_fingerprint (plan);
  g_assert_cmpuint (strlen (fingerprint), ==, 12);
  g_assert_true (g_str_has_prefix (digest, fingerprint));
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/plan-write/examples", test_examples);
  g_test_add_func ("/plan-write/small-plan", test_small_plan);
  g_test_add_func ("/plan-write/unknown-keys", test_unknown_keys);
  g_test_add_func ("/plan-write/order-and-values", test_order_and_values);
  g_test_add_func ("/plan-write/numbers", test_numbers);
  g_test_add_func ("/plan-write/random-numbers", test_random_numbers);
  g_test_add_func ("/plan-write/new-plan", test_new_plan);
  g_test_add_func ("/plan-write/fingerprint", test_fingerprint);
  return g_test_run ();
}
