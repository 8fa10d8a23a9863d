#include "site.h"

#include <string.h>

#include "plan-read.h"

static void
tell_faults (const GPtrArray *faults)
{
  for (guint i = 0; i < faults->len; i++)
    {
      const UtFault *fault = faults->pdata[i];
      g_test_message ("%s: %s", fault->path, fault->message);
    }
}

const UtPlan *
site_read (const char *text)
{
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  const UtPlan *plan = ut_plan_read (text, strlen (text), faults);

  tell_faults (faults);
  g_assert_nonnull (plan);
  return plan;
}

const UtPlan *
site_example (const char *name)
{
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), name, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GError) error = NULL;
  const UtPlan *plan = ut_plan_read_file (file, faults, &error);

  tell_faults (faults);
  g_assert_no_error (error);
  g_assert_nonnull (plan);
  return plan;
}

const UtPlan *
site_plan (const char *propagation, const char *storeys, const char *cells, const char *terminals)
{
  g_autofree char *text = g_strdup_printf (
    "{\"undertone\": 1, \"carrier\": {\"frequency_mhz\": 3600, \"bandwidth_mhz\": 20, \"sharing\": \"orthogonal\"},"
    " \"propagation\": {%s}, \"constructions\": ["
    "{\"id\": \"panel\", \"loss_db\": 10}, {\"id\": \"door\", \"loss_db\": 3},"
    "{\"id\": \"slab\", \"layers\": [{\"material\": \"concrete\", \"thickness_mm\": 200}]},"
    "{\"id\": \"stud\", \"layers\": [{\"material\": \"plasterboard\", \"thickness_mm\": 12.5}]}],"
    " \"storeys\": [%s], \"antennas\": ["
    "{\"id\": \"sector\", \"pattern\": \"sector\", \"gain_dbi\": 8, \"beamwidth_h_deg\": 65, \"beamwidth_v_deg\": 65}],"
    " \"cells\": [%s], \"terminals\": [%s], \"measured_gains_db\": {}}",
    propagation != NULL ? propagation : "\"base\": {\"law\": \"free-space\"}",
    storeys,
    cells,
    terminals);

  return site_read (text);
}

/* Numbers of the tests are exact in six decimals. */
static char *
radio_text (const char *id, double x_m, double y_m, double height_m, const char *rest, const char *more)
{
  char x[G_ASCII_DTOSTR_BUF_SIZE], y[G_ASCII_DTOSTR_BUF_SIZE], height[G_ASCII_DTOSTR_BUF_SIZE];

  return g_strdup_printf ("{\"id\": \"%s\", \"storey\": \"S1\", \"x_m\": %s, \"y_m\": %s, \"height_m\": %s, "
                          "\"power_dbm\": 20, \"power_min_dbm\": -20, \"power_max_dbm\": 24, \"power_step_db\": 0%s%s}",
                          id,
                          g_ascii_dtostr (x, sizeof x, x_m),
                          g_ascii_dtostr (y, sizeof y, y_m),
                          g_ascii_dtostr (height, sizeof height, height_m),
                          rest,
                          more != NULL ? more : "");
}

char *
site_cell (const char *id, double x_m, double y_m, double height_m, const char *more)
{
  return radio_text (id, x_m, y_m, height_m, "", more);
}

char *
site_terminal (const char *id, double x_m, double y_m, double height_m, const char *more)
{
  return radio_text (id, x_m, y_m, height_m, ", \"target_down_db\": 6, \"target_up_db\": 3", more);
}

char *
site_storey (const char *walls)
{
  return g_strdup_printf ("{\"id\": \"S1\", \"elevation_m\": 0, \"height_m\": 3, \"walls\": [%s]}", walls);
}
