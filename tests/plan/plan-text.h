/* A small plan in which every kind of object occurs, and ways to change it. */
#pragma once

#include <glib.h>
#include <string.h>

#include "plan-read.h"
#include "plan-write.h"

/* One key a line, each line once: tests change it by replacing text. */
static const char small_plan[] = "{\n"
                                 "  \"undertone\": 1,\n"
                                 "  \"carrier\": {\n"
                                 "    \"frequency_mhz\": 3750,\n"
                                 "    \"bandwidth_mhz\": 20,\n"
                                 "    \"sharing\": \"orthogonal\",\n"
                                 "    \"channels\": 2,\n"
                                 "    \"channel_isolation_db\": [30, 45.5]\n"
                                 "  },\n"
                                 "  \"propagation\": {\n"
                                 "    \"base\": {\n"
                                 "      \"law\": \"log-distance\",\n"
                                 "      \"exponent\": 2.9\n"
                                 "    }\n"
                                 "  },\n"
                                 "  \"constructions\": [\n"
                                 "    {\n"
                                 "      \"id\": \"block\",\n"
                                 "      \"layers\": [\n"
                                 "        {\n"
                                 "          \"material\": \"concrete\",\n"
                                 "          \"thickness_mm\": 200\n"
                                 "        }\n"
                                 "      ]\n"
                                 "    },\n"
                                 "    {\n"
                                 "      \"id\": \"panel\",\n"
                                 "      \"loss_db\": 14.5\n"
                                 "    }\n"
                                 "  ],\n"
                                 "  \"storeys\": [\n"
                                 "    {\n"
                                 "      \"id\": \"S1\",\n"
                                 "      \"elevation_m\": 0,\n"
                                 "      \"height_m\": 6,\n"
                                 "      \"floor\": \"block\",\n"
                                 "      \"walls\": [\n"
                                 "        {\n"
                                 "          \"id\": \"W1\",\n"
                                 "          \"construction\": \"panel\",\n"
                                 "          \"points\": [\n"
                                 "            [0, 0],\n"
                                 "            [40, 0]\n"
                                 "          ],\n"
                                 "          \"openings\": [\n"
                                 "            {\n"
                                 "              \"at_m\": 3,\n"
                                 "              \"width_m\": 2.5,\n"
                                 "              \"construction\": \"panel\"\n"
                                 "            }\n"
                                 "          ]\n"
                                 "        }\n"
                                 "      ]\n"
                                 "    }\n"
                                 "  ],\n"
                                 "  \"antennas\": [\n"
                                 "    {\n"
                                 "      \"id\": \"panel-65\",\n"
                                 "      \"pattern\": \"sector\",\n"
                                 "      \"gain_dbi\": 8,\n"
                                 "      \"beamwidth_h_deg\": 65,\n"
                                 "      \"beamwidth_v_deg\": 60\n"
                                 "    }\n"
                                 "  ],\n"
                                 "  \"cells\": [\n"
                                 "    {\n"
                                 "      \"id\": \"C1\",\n"
                                 "      \"storey\": \"S1\",\n"
                                 "      \"x_m\": 5,\n"
                                 "      \"y_m\": 8,\n"
                                 "      \"height_m\": 4,\n"
                                 "      \"antenna\": \"panel-65\",\n"
                                 "      \"power_dbm\": 24,\n"
                                 "      \"power_min_dbm\": -10,\n"
                                 "      \"power_max_dbm\": 24.5,\n"
                                 "      \"power_step_db\": 0,\n"
                                 "      \"channel\": 2\n"
                                 "    }\n"
                                 "  ],\n"
                                 "  \"terminals\": [\n"
                                 "    {\n"
                                 "      \"id\": \"T1\",\n"
                                 "      \"storey\": \"S1\",\n"
                                 "      \"x_m\": 30,\n"
                                 "      \"y_m\": 12,\n"
                                 "      \"height_m\": 1.5,\n"
                                 "      \"power_dbm\": 23,\n"
                                 "      \"power_min_dbm\": -40,\n"
                                 "      \"power_max_dbm\": 23.5,\n"
                                 "      \"power_step_db\": 0.5,\n"
                                 "      \"cell\": \"C1\",\n"
                                 "      \"target_down_db\": 6,\n"
                                 "      \"target_up_db\": null\n"
                                 "    }\n"
                                 "  ],\n"
                                 "  \"measured_gains_db\": {\n"
                                 "    \"T1\": {\n"
                                 "      \"C1\": -78.2\n"
                                 "    }\n"
                                 "  }\n"
                                 "}\n";

/* `text` with the first `from` replaced by `to`.  Transfer full. */
static inline char *
replaced (const char *text, const char *from, const char *to)
{
  const char *at = strstr (text, from);
  if (at == NULL)
    g_error ("no \"%s\" to replace", from);
  return g_strdup_printf ("%.*s%s%s", (int)(at - text), text, to, at + strlen (from));
}

/* A plan that must be valid. */
static inline const UtPlan *
read_valid (const char *text)
{
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  const UtPlan *plan = ut_plan_read (text, strlen (text), faults);
  if (faults->len > 0)
    g_test_message (
        "%s: %s", ((UtFault *)faults->pdata[0])->path, ((UtFault *)faults->pdata[0])->message);
  g_assert_cmpuint (faults->len, ==, 0);
  g_assert_nonnull (plan);
  return plan;
}

static inline char *
written (const UtPlan *plan)
{
  return ut_plan_write (plan, NULL);
}
