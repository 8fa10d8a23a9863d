/* What reading refuses, where it says so, and what it fills in. */
#include <math.h>

#include "plan-text.h"

/* One change to the small plan and the one fault it must give. */
typedef struct
{
  const char *from, *to;
  const char *path;
  const char *word; /* of the message */
} Refusal;

static const Refusal single_faults[] = {
  { "\"undertone\": 1", "\"undertone\": 2", "undertone", "newer version" },
  { "\"undertone\": 1", "\"undertone\": 0", "undertone", "expected 1" },
  { "\"undertone\": 1", "\"undertone\": 1.5", "undertone", "newer version" },
  { "\"undertone\": 1", "\"undertone\": \"1\"", "undertone", "wrong type, a text" },
  { "\"undertone\": 1,", "", "undertone", "missing" },
  /* Missing keys */
  { "\"frequency_mhz\": 3750,", "", "carrier.frequency_mhz", "missing; expected a number above 0" },
  { "\"bandwidth_mhz\": 20,", "", "carrier.bandwidth_mhz", "missing" },
  { "\"sharing\": \"orthogonal\",", "", "carrier.sharing", "missing; expected one of" },
  { "\"law\": \"log-distance\",", "", "propagation.base.law", "missing" },
  { "\"law\": \"log-distance\",\n      \"exponent\": 2.9",
    "\"law\": \"log-distance\"",
    "propagation.base.exponent",
    "missing" },
  { "\"base\": {\n      \"law\": \"log-distance\",\n      \"exponent\": 2.9\n    }",
    "",
    "propagation.base",
    "missing" },
  { "      \"id\": \"block\",\n", "", "constructions[0].id", "missing" },
  { "\"material\": \"concrete\",", "", "constructions[0].layers[0].material", "missing" },
  { "\"material\": \"concrete\",\n          \"thickness_mm\": 200",
    "\"material\": \"concrete\"",
    "constructions[0].layers[0].thickness_mm",
    "missing" },
  { "\"elevation_m\": 0,", "", "storeys[0].elevation_m", "missing" },
  { "\"height_m\": 6,", "", "storeys[0].height_m", "missing" },
  { "          \"construction\": \"panel\",\n", "", "storeys[0].walls[0].construction", "missing" },
  { "\"at_m\": 3,", "", "storeys[0].walls[0].openings[0].at_m", "missing" },
  { "\"width_m\": 2.5,", "", "storeys[0].walls[0].openings[0].width_m", "missing" },
  { "\"width_m\": 2.5,\n              \"construction\": \"panel\"",
    "\"width_m\": 2.5",
    "storeys[0].walls[0].openings[0].construction",
    "missing" },
  { "\"pattern\": \"sector\",", "", "antennas[0].pattern", "missing" },
  { "\"beamwidth_h_deg\": 65,", "", "antennas[0].beamwidth_h_deg", "missing" },
  { "\"x_m\": 5,", "", "cells[0].x_m", "missing; expected a number" },
  { "\"y_m\": 8,", "", "cells[0].y_m", "missing" },
  { "\"height_m\": 4,", "", "cells[0].height_m", "missing" },
  { "\"power_dbm\": 24,", "", "cells[0].power_dbm", "missing" },
  { "\"power_min_dbm\": -10,", "", "cells[0].power_min_dbm", "missing" },
  { "\"power_max_dbm\": 24.5,", "", "cells[0].power_max_dbm", "missing" },
  { "\"power_step_db\": 0,", "", "cells[0].power_step_db", "missing" },
  { "\"target_down_db\": 6,",
    "",
    "terminals[0].target_down_db",
    "missing; expected a number from -400 to 400, or null" },
  { "\"target_down_db\": 6,\n      \"target_up_db\": null",
    "\"target_down_db\": 6",
    "terminals[0].target_up_db",
    "missing" },
  /* Wrong types; null where none is shown */
  { "\"frequency_mhz\": 3750",
    "\"frequency_mhz\": \"3750\"",
    "carrier.frequency_mhz",
    "wrong type, a text; expected a number" },
  { "\"frequency_mhz\": 3750",
    "\"frequency_mhz\": null",
    "carrier.frequency_mhz",
    "wrong type, null" },
  { "\"sharing\": \"orthogonal\"",
    "\"sharing\": true",
    "carrier.sharing",
    "wrong type, true or false" },
  { "\"channel_isolation_db\": [30, 45.5]",
    "\"channel_isolation_db\": 30",
    "carrier.channel_isolation_db",
    "wrong type, a number" },
  { "\"channel_isolation_db\": [30, 45.5]",
    "\"channel_isolation_db\": [30, null]",
    "carrier.channel_isolation_db[1]",
    "wrong type, null" },
  { "\"x_m\": 5", "\"x_m\": [5]", "cells[0].x_m", "wrong type, a list" },
  { "\"channel\": 2", "\"channel\": 1.5", "cells[0].channel", "not a whole number" },
  { "\"channels\": 2", "\"channels\": 2.5", "carrier.channels", "not a whole number" },
  { "\"cell\": \"C1\"", "\"cell\": 1", "terminals[0].cell", "wrong type" },
  { "\"cell\": \"C1\"",
    "\"on\": 1",
    "terminals[0].on",
    "wrong type, a number; expected true or false" },
  { "\"cell\": \"C1\"", "\"on\": null", "terminals[0].on", "wrong type, null" },
  { "\"cell\": \"C1\"",
    "\"fields\": []",
    "terminals[0].fields",
    "wrong type, a list; expected an object" },
  { "\"cell\": \"C1\"", "\"name\": 3", "terminals[0].name", "wrong type" },
  { "\"undertone\": 1", "\"undertone\": 1, \"title\": null", "title", "wrong type, null" },
  { "\"undertone\": 1", "\"undertone\": 1, \"site\": []", "site", "wrong type, a list" },
  { "\"measured_gains_db\": {\n    \"T1\": {\n      \"C1\": -78.2\n    }\n  }",
    "\"measured_gains_db\": []",
    "measured_gains_db",
    "wrong type" },
  { "\"C1\": -78.2", "\"C1\": null", "measured_gains_db.T1.C1", "wrong type, null" },
  { "[40, 0]", "[40, 0, 1]", "storeys[0].walls[0].points[1]", "3 figures" },
  { "[40, 0]", "40", "storeys[0].walls[0].points[1]", "wrong type" },
  { "[40, 0]", "[\"a\", 0]", "storeys[0].walls[0].points[1][0]", "wrong type" },
  { "\"id\": \"C1\"",
    "\"id\": \"C1\", \"feeder_loss_db\": {}",
    "cells[0].feeder_loss_db",
    "wrong type, an object" },
  /* Ranges */
  { "\"frequency_mhz\": 3750",
    "\"frequency_mhz\": 0",
    "carrier.frequency_mhz",
    "0 is out of range; expected a number above 0" },
  { "\"bandwidth_mhz\": 20", "\"bandwidth_mhz\": -1", "carrier.bandwidth_mhz", "out of range" },
  { "\"channels\": 2,",
    "\"channels\": 2, \"noise_temperature_k\": 0,",
    "carrier.noise_temperature_k",
    "above 0" },
  { "\"channels\": 2,",
    "\"channels\": 2, \"downlink_orthogonality\": 1.01,",
    "carrier.downlink_orthogonality",
    "from 0 to 1" },
  { "\"channels\": 2,",
    "\"channels\": 2, \"processing_gain_db\": -1,",
    "carrier.processing_gain_db",
    "from 0 to 400" },
  { "\"channels\": 2,",
    "\"channels\": 2, \"resource_blocks\": 0,",
    "carrier.resource_blocks",
    "at least 1" },
  { "\"channels\": 2,",
    "\"channels\": 2, \"margin_db\": 401,",
    "carrier.margin_db",
    "from -400 to 400" },
  { "\"channels\": 2,",
    "\"channels\": 2, \"polarization\": \"slant\",",
    "carrier.polarization",
    "\"slant\" is unknown; expected one of vertical, horizontal, mixed" },
  { "[30, 45.5]", "[30, -1]", "carrier.channel_isolation_db[1]", "out of range" },
  { "\"exponent\": 2.9", "\"exponent\": 0", "propagation.base.exponent", "above 0" },
  { "\"exponent\": 2.9",
    "\"exponent\": 2.9, \"reference_m\": 0",
    "propagation.base.reference_m",
    "above 0" },
  { "\"log-distance\"",
    "\"hearsay\"",
    "propagation.base.law",
    "unknown; expected one of free-space, log-distance" },
  { "\"base\": {", "\"correlation_m\": 0, \"base\": {", "propagation.correlation_m", "above 0" },
  { "\"base\": {", "\"shadowing_db\": -1, \"base\": {", "propagation.shadowing_db", "from 0" },
  { "\"base\": {",
    "\"wall_loss_limit_db\": null, \"base\": {",
    "propagation.wall_loss_limit_db",
    "wrong type" },
  { "\"base\": {", "\"slab\": \"thick\", \"base\": {", "propagation.slab", "unknown" },
  { "\"concrete\"",
    "\"cheese\"",
    "constructions[0].layers[0].material",
    "\"cheese\" is unknown; expected one of concrete" },
  { "\"concrete\"",
    "{\"relative_permittivity\": 0.5, \"conductivity_s_m\": 0}",
    "constructions[0].layers[0].material.relative_permittivity",
    "at least 1" },
  { "\"concrete\"",
    "{\"relative_permittivity\": 5}",
    "constructions[0].layers[0].material.conductivity_s_m",
    "missing" },
  { "\"thickness_mm\": 200",
    "\"thickness_mm\": 0",
    "constructions[0].layers[0].thickness_mm",
    "above 0" },
  { "\"loss_db\": 14.5", "\"loss_db\": -0.5", "constructions[1].loss_db", "from 0 to 400" },
  { "\"height_m\": 6", "\"height_m\": 0", "storeys[0].height_m", "above 0" },
  { "\"construction\": \"panel\",\n",
    "\"construction\": \"panel\", \"height_m\": 0,\n",
    "storeys[0].walls[0].height_m",
    "above 0" },
  { "\"at_m\": 3", "\"at_m\": -3", "storeys[0].walls[0].openings[0].at_m", "at least 0" },
  { "\"width_m\": 2.5", "\"width_m\": 0", "storeys[0].walls[0].openings[0].width_m", "above 0" },
  { "\"at_m\": 3",
    "\"sill_m\": -1, \"at_m\": 3",
    "storeys[0].walls[0].openings[0].sill_m",
    "at least 0" },
  { "\"pattern\": \"sector\"",
    "\"pattern\": \"dish\"",
    "antennas[0].pattern",
    "unknown; expected one of isotropic, sector" },
  { "\"gain_dbi\": 8", "\"gain_dbi\": 500", "antennas[0].gain_dbi", "from -400 to 400" },
  { "\"beamwidth_v_deg\": 60", "\"beamwidth_v_deg\": 0", "antennas[0].beamwidth_v_deg", "above 0" },
  { "\"id\": \"C1\"",
    "\"id\": \"C1\", \"downtilt_deg\": 91",
    "cells[0].downtilt_deg",
    "from -90 to 90" },
  { "\"id\": \"C1\"", "\"id\": \"C1\", \"activity\": 1.5", "cells[0].activity", "from 0 to 1" },
  { "\"id\": \"C1\"",
    "\"id\": \"C1\", \"noise_figure_db\": -1",
    "cells[0].noise_figure_db",
    "from 0" },
  { "\"id\": \"C1\"",
    "\"id\": \"C1\", \"feeder_loss_db\": -1",
    "cells[0].feeder_loss_db",
    "from 0" },
  { "\"power_step_db\": 0,", "\"power_step_db\": -1,", "cells[0].power_step_db", "from 0" },
  { "\"channel\": 2", "\"channel\": 3", "cells[0].channel", "expected a whole number from 1 to 2" },
  { "\"channel\": 2", "\"channel\": 0", "cells[0].channel", "at least 1" },
  { "\"power_dbm\": 24,", "\"power_dbm\": 401,", "cells[0].power_dbm", "from -400 to 400" },
  { "\"cell\": \"C1\"", "\"priority\": 0", "terminals[0].priority", "above 0" },
  { "\"cell\": \"C1\"", "\"body_loss_db\": -1", "terminals[0].body_loss_db", "from 0" },
  { "\"target_down_db\": 6",
    "\"target_down_db\": -401",
    "terminals[0].target_down_db",
    "out of range" },
  { "-78.2", "-401", "measured_gains_db.T1.C1", "out of range" },
  /* Not finite, in known and unknown keys */
  { "\"x_m\": 5", "\"x_m\": 1e999", "cells[0].x_m", "not finite" },
  { "-78.2", "-1e999", "measured_gains_db.T1.C1", "not finite" },
  { "[40, 0]", "[40, 1e400]", "storeys[0].walls[0].points[1][1]", "not finite" },
  { "\"undertone\": 1",
    "\"undertone\": 1, \"later\": {\"list\": [0, 1e999]}",
    "later.list[1]",
    "not finite" },
  { "\"cell\": \"C1\"",
    "\"fields\": {\"length\": 1e999}",
    "terminals[0].fields.length",
    "not finite" },
  /* References */
  { "\"storey\": \"S1\"",
    "\"storey\": \"S9\"",
    "cells[0].storey",
    "\"S9\" refers to nothing; expected the id of a storey" },
  { "\"antenna\": \"panel-65\"",
    "\"antenna\": \"horn\"",
    "cells[0].antenna",
    "the id of an antenna" },
  { "\"floor\": \"block\"",
    "\"floor\": \"slab\"",
    "storeys[0].floor",
    "the id of a construction, or null" },
  { "          \"construction\": \"panel\",",
    "          \"construction\": \"?\",",
    "storeys[0].walls[0].construction",
    "refers to nothing" },
  { "\"width_m\": 2.5,\n              \"construction\": \"panel\"",
    "\"width_m\": 2.5, \"construction\": \"?\"",
    "storeys[0].walls[0].openings[0].construction",
    "refers to nothing" },
  { "\"cell\": \"C1\"", "\"cell\": \"T1\"", "terminals[0].cell", "the id of a cell, or null" },
  { "\"C1\": -78.2",
    "\"C77\": -78.2",
    "measured_gains_db.T1.C77",
    "refers to nothing; expected the id of a cell" },
  { "\"T1\": {",
    "\"T9\": {",
    "measured_gains_db.T9",
    "refers to nothing; expected the id of a terminal" },
  /* Ids */
  { "\"id\": \"C1\"", "\"id\": \"\"", "cells[0].id", "empty" },
  { "\"id\": \"panel\"",
    "\"id\": \"block\"",
    "constructions[1].id",
    "used twice, first at constructions[0].id" },
  { "\"id\": \"panel-65\"", "\"id\": \"isotropic\"", "antennas[0].id", "reserved" },
  /* Rules */
  { "\"power_min_dbm\": -10",
    "\"power_min_dbm\": 25",
    "cells[0].power_min_dbm",
    "25 is above power_max_dbm, 24.5" },
  { "\"power_max_dbm\": 23.5",
    "\"power_max_dbm\": -41",
    "terminals[0].power_min_dbm",
    "-40 is above power_max_dbm, -41" },
  { "[40, 0]", "[0, 0]", "storeys[0].walls[0].points", "fewer than two distinct points" },
  { "            [0, 0],\n", "", "storeys[0].walls[0].points", "fewer than two distinct points" },
  { "[\n            [0, 0],\n            [40, 0]\n          ]",
    "[]",
    "storeys[0].walls[0].points",
    "fewer than two distinct points" },
  { "\"id\": \"panel\",\n      \"loss_db\": 14.5",
    "\"id\": \"panel\"",
    "constructions[1]",
    "neither layers nor loss_db" },
  { "\"id\": \"panel\",\n      \"loss_db\": 14.5",
    "\"id\": \"panel\", \"layers\": []",
    "constructions[1]",
    "neither layers nor loss_db" },
  { "\"id\": \"block\",",
    "\"id\": \"block\", \"loss_db\": 3,",
    "constructions[0]",
    "both layers and loss_db" },
  /* Backdrop */
  { "\"floor\": \"block\"",
    "\"backdrop\": {\"media_type\": \"image/png\", \"width_m\": 1, \"height_m\": 1, \"data\": "
    "\"AA=\"}",
    "storeys[0].backdrop.data",
    "not base64" },
  { "\"floor\": \"block\"",
    "\"backdrop\": {\"media_type\": \"image/png\", \"width_m\": 1, \"height_m\": 1, \"data\": "
    "\"\"}",
    "storeys[0].backdrop.data",
    "empty" },
  { "\"floor\": \"block\"",
    "\"backdrop\": {\"media_type\": \"text/html\", \"width_m\": 1, \"height_m\": 1, \"data\": "
    "\"AAAA\"}",
    "storeys[0].backdrop.media_type",
    "unknown" },
  /* Names that need care */
  { "\"undertone\": 1",
    "\"undertone\": 1, \"a.b\": {\"c\\nd\": 1e999}",
    "[\"a.b\"][\"c\\u000ad\"]",
    "not finite" },
  /* Syntax */
  { "\"undertone\": 1,", "\"undertone\": 1,\n  oops", "line 3, column 3", "expected a key" },
};

static GPtrArray *
faults_of (const char *text)
{
  GPtrArray *faults = ut_faults_new ();
  g_assert_null (ut_plan_read (text, strlen (text), faults));
  for (guint i = 0; i < faults->len; i++)
    {
      const UtFault *fault = faults->pdata[i];
      g_test_message ("%s: %s", fault->path, fault->message);
      g_assert_null (strpbrk (fault->path, "\n\r"));
      g_assert_null (strpbrk (fault->message, "\n\r"));
      g_assert_nonnull (strstr (fault->message, "; expected "));
    }
  return faults;
}

static void
assert_fault (GPtrArray *faults, guint index, const char *path, const char *word)
{
  g_assert_cmpuint (index, <, faults->len);
  const UtFault *fault = faults->pdata[index];
  g_assert_cmpstr (fault->path, ==, path);
  g_assert_nonnull (strstr (fault->message, word));
}

static void
test_refusals (void)
{
  for (guint i = 0; i < G_N_ELEMENTS (single_faults); i++)
    {
      const Refusal *refusal = &single_faults[i];
      g_autofree char *shown = g_strescape (refusal->to, NULL);
      g_test_message ("case %u: %s", i, shown);
      g_autofree char *text = replaced (small_plan, refusal->from, refusal->to);
      g_autoptr (GPtrArray) faults = faults_of (text);
      assert_fault (faults, 0, refusal->path, refusal->word);
      g_assert_cmpuint (faults->len, ==, 1);
    }
}

/* A mistake's consequences are not reported again. */
static void
test_consequences (void)
{
  static const struct
  {
    const char *from, *to, *path;
  } cases[] = {
    /* What is named is there, only its id cannot be read. */
    { "\"id\": \"S1\"", "\"id\": 1", "storeys[0].id" },
    { "\"id\": \"panel\"", "\"id\": \"\"", "constructions[1].id" },
    { "      \"id\": \"panel-65\",\n", "", "antennas[0].id" },
    { "      \"id\": \"C1\",\n", "", "cells[0].id" },
    { "      \"id\": \"T1\",\n", "", "terminals[0].id" },
    /* A construction with a fault still exists. */
    { "\"loss_db\": 14.5", "\"loss_db\": \"?\"", "constructions[1].loss_db" },
    { "\"thickness_mm\": 200", "\"thickness_mm\": -1", "constructions[0].layers[0].thickness_mm" },
    /* Channels that cannot be read judge nobody. */
    { "\"channels\": 2", "\"channels\": 0", "carrier.channels" },
    /* A power that cannot be read is above nothing. */
    { "\"power_max_dbm\": 24.5", "\"power_max_dbm\": -1e999", "cells[0].power_max_dbm" },
    /* A pattern that is not known asks for nothing. */
    { "\"pattern\": \"sector\"", "\"pattern\": 7", "antennas[0].pattern" },
    /* A terminal that is not there has no gains to be judged. */
    { "\"T1\": {\n      \"C1\": -78.2", "\"T9\": {\n      \"C9\": 900", "measured_gains_db.T9" },
    /* A point that cannot be read may be the second one. */
    { "[40, 0]", "[40, null]", "storeys[0].walls[0].points[1][1]" },
    /* Nothing else of a later version is judged. */
    { "\"undertone\": 1", "\"undertone\": 3, \"title\": 1", "undertone" },
  };
  for (guint i = 0; i < G_N_ELEMENTS (cases); i++)
    {
      g_autofree char *text = replaced (small_plan, cases[i].from, cases[i].to);
      g_autoptr (GPtrArray) faults = faults_of (text);
      assert_fault (faults, 0, cases[i].path, "");
      g_assert_cmpuint (faults->len, ==, 1);
    }
}

/* Lists that are wrong as a whole do not make their users wrong. */
static void
test_broken_lists (void)
{
  static const char *const keys[]
      = { "constructions", "storeys", "antennas", "cells", "terminals" };
  for (guint i = 0; i < G_N_ELEMENTS (keys); i++)
    {
      g_autofree char *from = g_strdup_printf ("\n  \"%s\": [", keys[i]);
      g_autofree char *to = g_strdup_printf ("\n  \"%s\": 5, \"%s-was\": [", keys[i], keys[i]);
      g_autofree char *text = replaced (small_plan, from, to);
      g_autoptr (GPtrArray) faults = faults_of (text);
      assert_fault (faults, 0, keys[i], "wrong type, a number; expected a list");
      g_assert_cmpuint (faults->len, ==, 1);
    }
}

/* Several faults come in file order, missing keys after the others of their object. */
static void
test_order (void)
{
  g_autofree char *a = replaced (small_plan, "\"frequency_mhz\": 3750", "\"frequency_mhz\": -1");
  g_autofree char *b = replaced (a, "\"sharing\": \"orthogonal\",", "");
  g_autofree char *c = replaced (b, "\"material\": \"concrete\"", "\"material\": \"cheese\"");
  g_autofree char *d = replaced (c, "\"at_m\": 3", "\"at_m\": false");
  g_autofree char *e = replaced (d, "\"x_m\": 30", "\"x_m\": null");
  g_autofree char *text = replaced (e, "-78.2", "\"\"");
  g_autoptr (GPtrArray) faults = faults_of (text);
  const char *const paths[] = { "carrier.frequency_mhz",
                                "carrier.sharing",
                                "constructions[0].layers[0].material",
                                "storeys[0].walls[0].openings[0].at_m",
                                "terminals[0].x_m",
                                "measured_gains_db.T1.C1" };
  g_assert_cmpuint (faults->len, ==, G_N_ELEMENTS (paths));
  for (guint i = 0; i < G_N_ELEMENTS (paths); i++)
    assert_fault (faults, i, paths[i], "");
}

static void
test_most (void)
{
  g_autoptr (GString) list = g_string_new ("\"later\": [");
  for (guint i = 0; i < 3 * UT_FAULTS_MOST; i++)
    g_string_append (list, i > 0 ? ", 1e999" : "1e999");
  g_string_append (list, "], \"undertone\": 1");
  g_autofree char *text = replaced (small_plan, "\"undertone\": 1", list->str);
  g_autoptr (GPtrArray) faults = faults_of (text);
  g_assert_cmpuint (faults->len, ==, UT_FAULTS_MOST);
  assert_fault (faults, UT_FAULTS_MOST - 1, "later[19]", "not finite");

  /* A list that is full already makes no plan valid. */
  g_assert_null (ut_plan_read (text, strlen (text), faults));
  g_assert_cmpuint (faults->len, ==, UT_FAULTS_MOST);
}

static void
test_not_a_plan (void)
{
  static const struct
  {
    const char *text, *path, *word;
  } cases[] = {
    { "", "line 1, column 1", "empty" }, { "[]", "", "holds a list" },
    { "null", "", "holds null" },        { "1e999", "", "holds a number" },
    { "{}", "undertone", "missing" },
  };
  for (guint i = 0; i < G_N_ELEMENTS (cases); i++)
    {
      g_autoptr (GPtrArray) faults = faults_of (cases[i].text);
      assert_fault (faults, 0, cases[i].path, cases[i].word);
    }
  /* All that a plan must have. */
  g_autoptr (GPtrArray) faults = faults_of ("{}");
  g_assert_cmpuint (faults->len, ==, 6);
}

/* The least a plan can be, and the contract's defaults in it. */
static void
test_defaults (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *)read_valid (
      "{\"undertone\": 1.0, \"carrier\": {\"frequency_mhz\": 868.3, \"bandwidth_mhz\": 0.5, "
      "\"sharing\": \"simultaneous\"},"
      "\"propagation\": {\"base\": {\"law\": \"log-distance\", \"exponent\": 3}},"
      "\"constructions\": [{\"id\": \"p\", \"loss_db\": 0, \"layers\": []},"
      " {\"id\": \"own\", \"layers\": [{\"material\": {\"relative_permittivity\": 2.6, "
      "\"conductivity_s_m\": 0.02}, \"thickness_mm\": 5}]}],"
      "\"storeys\": [{\"id\": \"S\", \"elevation_m\": -3, \"height_m\": 2.5,"
      " \"walls\": [{\"id\": \"W\", \"construction\": \"p\", \"points\": [[0, 0], [0, -1]],"
      "  \"openings\": [{\"at_m\": 0, \"width_m\": 1, \"construction\": \"p\"}]}]}],"
      "\"cells\": [{\"id\": \"A\", \"storey\": \"S\", \"x_m\": -1, \"y_m\": 0, \"height_m\": -2, "
      "\"power_dbm\": 99,"
      " \"power_min_dbm\": 0, \"power_max_dbm\": 0, \"power_step_db\": 0}],"
      "\"terminals\": [{\"id\": \"A\", \"storey\": \"S\", \"x_m\": 1, \"y_m\": 0, \"height_m\": 1, "
      "\"power_dbm\": 0,"
      " \"power_min_dbm\": -1, \"power_max_dbm\": 0, \"power_step_db\": 3, \"target_down_db\": "
      "null, \"target_up_db\": -3}]}");

  g_assert_cmpstr (plan->title, ==, "");
  g_assert_true (plan->site->north_deg == 0 && isnan (plan->site->latitude)
                 && isnan (plan->site->longitude));
  g_assert_cmpstr (plan->site->datum, ==, "");
  const UtCarrier *carrier = plan->carrier;
  g_assert_true (carrier->sharing == UT_SHARING_SIMULTANEOUS
                 && carrier->polarization == UT_POLARIZATION_VERTICAL);
  g_assert_true (carrier->processing_gain_db == 0 && carrier->downlink_orthogonality == 0
                 && carrier->margin_db == 0);
  g_assert_true (carrier->channels == 1 && carrier->channel_isolation_db->len == 0
                 && carrier->resource_blocks == 0);
  g_assert_true (carrier->noise_temperature_k == 290 && isnan (carrier->eirp_limit_dbm));
  const UtPropagation *propagation = plan->propagation;
  g_assert_true (propagation->law == UT_BASE_LOG_DISTANCE && propagation->exponent == 3
                 && propagation->reference_m == 1);
  g_assert_true (propagation->walls && propagation->wall_loss_limit_db == 40
                 && isnan (propagation->excess_loss_limit_db));
  g_assert_true (propagation->slab == UT_SLAB_COHERENT && propagation->shadowing_db == 0
                 && propagation->correlation_m == 6);
  g_assert_true (ut_plan_construction (plan, 0)->loss_db == 0
                 && ut_plan_construction (plan, 0)->layers->len == 0);
  const UtConstruction *own = ut_plan_construction (plan, 1);
  const UtConstructionLayer *layer = own->layers->pdata[0];
  g_assert_true (isnan (own->loss_db) && layer->material == NULL);
  g_assert_true (layer->relative_permittivity == 2.6 && layer->conductivity_s_m == 0.02
                 && layer->thickness_mm == 5);
  const UtStorey *storey = ut_plan_storey (plan, 0);
  g_assert_cmpstr (storey->name, ==, "S");
  g_assert_true (storey->floor == NULL && storey->backdrop == NULL);
  const UtWall *wall = storey->walls->pdata[0];
  const UtOpening *opening = wall->openings->pdata[0];
  g_assert_true (isnan (wall->height_m) && opening->shut && opening->sill_m == 0
                 && isnan (opening->head_m));
  const UtCell *cell = ut_plan_cell (plan, 0);
  g_assert_cmpstr (cell->radio.name, ==, "A");
  g_assert_cmpstr (cell->radio.antenna, ==, "isotropic");
  g_assert_true (cell->radio.azimuth_deg == 0 && cell->radio.downtilt_deg == 0
                 && cell->radio.feeder_loss_db == 0);
  g_assert_true (cell->radio.noise_figure_db == 5 && cell->radio.activity == 1 && cell->radio.on
                 && cell->channel == 1);
  const UtTerminal *terminal = ut_plan_terminal (plan, 0);
  g_assert_true (terminal->radio.noise_figure_db == 9 && terminal->body_loss_db == 0
                 && terminal->priority == 1);
  g_assert_true (terminal->cell == NULL && terminal->radio.fields == NULL
                 && isnan (terminal->level_down_dbm) && isnan (terminal->level_up_dbm));
  g_assert_true (isnan (terminal->target_down_db) && terminal->target_up_db == -3);
  g_assert_cmpuint (plan->antennas->len + plan->measured_gains->len, ==, 0);
}

static void
test_values (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *)read_valid (small_plan);
  g_assert_cmpint (ut_plan_find_construction (plan, "panel"), ==, 1);
  g_assert_cmpint (ut_plan_find_construction (plan, "door"), ==, -1);
  g_assert_cmpint (ut_plan_find_cell (plan, NULL), ==, -1);
  g_assert_cmpint (ut_plan_find_antenna (plan, "isotropic"), ==, -1);
  g_assert_true (g_array_index (plan->carrier->channel_isolation_db, double, 1) == 45.5);
  g_assert_true (ut_plan_antenna (plan, 0)->beamwidth_v_deg == 60
                 && ut_plan_antenna (plan, 0)->pattern == UT_ANTENNA_SECTOR);
  const UtMeasuredGain *gain = plan->measured_gains->pdata[0];
  g_assert_cmpstr (gain->terminal, ==, "T1");
  g_assert_cmpstr (gain->cell, ==, "C1");
  g_assert_true (gain->gain_db == -78.2);
}

/* Marks of the contract that a reader could miss: all of these are valid. */
static void
test_allowed (void)
{
  static const char *const changes[][2] = {
    { "\"channel\": 2", "\"channel\": 2.0" },
    { "\"storey\": \"S1\"", "\"azimuth_deg\": -720.5, \"storey\": \"S1\"" },
    { "\"power_dbm\": 24,", "\"power_dbm\": -400," },
    { "\"at_m\": 3", "\"at_m\": 300" },
    { "\"id\": \"T1\"", "\"id\": \"C1\", \"was\": \"T1\"" }, /* with the next line, see below */
    { "\"antenna\": \"panel-65\"", "\"antenna\": \"isotropic\"" },
    { "\"gain_dbi\": 8,", "" },
    { "\"floor\": \"block\"", "\"floor\": null, \"backdrop\": null" },
    { "\"cell\": \"C1\"", "\"cell\": null, \"fields\": {\"cable tag\": \"A-07\", \"n\": [1, {}]}" },
  };
  for (guint i = 0; i < G_N_ELEMENTS (changes); i++)
    {
      g_autofree char *changed = replaced (small_plan, changes[i][0], changes[i][1]);
      g_autofree char *text = strstr (changed, "\"was\"") != NULL
                                  ? replaced (changed, "\"T1\": {", "\"C1\": {")
                                  : g_strdup (changed);
      g_test_message ("%s", changes[i][1]);
      g_autoptr (UtPlan) plan = (UtPlan *)read_valid (text);
      g_assert_nonnull (plan);
    }
}

static void
test_file (void)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GFile) missing = g_file_new_for_path ("/nonexistent/no.undertone");
  g_assert_null (ut_plan_read_file (missing, faults, &error));
  g_assert_error (error, G_IO_ERROR, G_IO_ERROR_NOT_FOUND);
  g_assert_cmpuint (faults->len, ==, 0);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/plan-read/refusals", test_refusals);
  g_test_add_func ("/plan-read/consequences", test_consequences);
  g_test_add_func ("/plan-read/broken-lists", test_broken_lists);
  g_test_add_func ("/plan-read/order", test_order);
  g_test_add_func ("/plan-read/most", test_most);
  g_test_add_func ("/plan-read/not-a-plan", test_not_a_plan);
  g_test_add_func ("/plan-read/defaults", test_defaults);
  g_test_add_func ("/plan-read/values", test_values);
  g_test_add_func ("/plan-read/allowed", test_allowed);
  g_test_add_func ("/plan-read/file", test_file);
  return g_test_run ();
}
