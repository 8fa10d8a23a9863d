#include "verbs.h"

#include <errno.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>

#include <gio/gio.h>

#include "channels.h"
#include "commissioning.h"
#include "page-file.h"
#include "path.h"
#include "plan-check.h"
#include "plan-read.h"
#include "plan-write.h"
#include "report.h"

void
ut_complain (const char *format, ...)
{
  va_list arguments;
  g_autofree char *message = NULL;

  va_start (arguments, format);
  message = g_strdup_vprintf (format, arguments);
  va_end (arguments);
  g_strdelimit (message, "\r\n", ' '); /* one complaint, one line, whatever a name contains */
  fprintf (stderr, "undertone-cli: %s\n", message);
}

static void
warn_all (const GPtrArray *warnings)
{
  for (guint i = 0; i < warnings->len; i++)
    ut_complain ("warning: %s", (const char *) warnings->pdata[i]);
}

/* All of standard input.  FALSE, with errno, when it cannot be read. */
static gboolean
read_standard_input (GString *text)
{
  char buffer[65536];
  gssize n;

  while ((n = read (STDIN_FILENO, buffer, sizeof buffer)) != 0)
    if (n > 0)
      g_string_append_len (text, buffer, n);
    else if (errno != EINTR)
      return FALSE;
  return TRUE;
}

static const UtPlan *
read_plan (const char *name, GPtrArray *faults)
{
  g_autoptr (GError) error = NULL;
  const UtPlan *plan = NULL;

  if (strcmp (name, "-") == 0)
    {
      GString *text = g_string_new (NULL);

      if (read_standard_input (text))
        plan = ut_plan_read (text->str, text->len, faults);
      else
        ut_complain ("%s: cannot be read: %s", name, g_strerror (errno));
      g_string_free (text, TRUE);
      return plan;
    }
  g_autoptr (GFile) file = g_file_new_for_commandline_arg (name);
  plan = ut_plan_read_file (file, faults, &error);
  if (error != NULL)
    ut_complain ("%s: cannot be opened: %s", name, error->message);
  return plan;
}

/* The plan named first in the order, or NULL with every fault told. */
static const UtPlan *
open_plan (const UtOrder *order)
{
  const char *name = order->arguments[0];
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  const UtPlan *plan = read_plan (name, faults);

  for (guint i = 0; i < faults->len; i++)
    {
      const UtFault *fault = faults->pdata[i];

      if (fault->path[0] == '\0')
        ut_complain ("%s: %s", name, fault->message);
      else
        ut_complain ("%s: %s: %s", name, fault->path, fault->message);
    }
  return plan;
}

UtExit
ut_print_text (char *text)
{
  gboolean written = fputs (text, stdout) >= 0 && fflush (stdout) == 0;

  g_free (text);
  if (written)
    return UT_EXIT_DONE;
  ut_complain ("standard output cannot be written: %s", g_strerror (errno));
  return UT_EXIT_NOT_WRITTEN;
}

UtExit
ut_verb_check (const UtOrder *order)
{
  g_autoptr (UtPlan) plan = (UtPlan *) open_plan (order);
  g_autoptr (GPtrArray) warnings = ut_faults_new ();
  guint walls = 0;

  if (plan == NULL)
    return UT_EXIT_BAD_PLAN;
  ut_plan_warnings (plan, warnings);
  for (guint i = 0; i < warnings->len; i++)
    {
      const UtFault *warning = warnings->pdata[i];
      ut_complain ("warning: %s: %s", warning->path, warning->message);
    }
  for (guint i = 0; i < plan->storeys->len; i++)
    walls += ut_plan_storey (plan, i)->walls->len;
  return ut_print_text (g_strdup_printf ("%s: valid; %u storeys, %u walls, %u cells, %u terminals\n",
                                      order->arguments[0],
                                      plan->storeys->len,
                                      walls,
                                      plan->cells->len,
                                      plan->terminals->len));
}

UtExit
ut_verb_gains (const UtOrder *order)
{
  g_autoptr (UtPlan) plan = (UtPlan *) open_plan (order);

  if (plan == NULL)
    return UT_EXIT_BAD_PLAN;
  g_autoptr (UtGains) gains = ut_gains_new (plan, NULL);
  g_autofree char *range = ut_gains_range_warning (gains);
  warn_all (ut_wall_index_warnings (gains->index));
  if (range != NULL)
    ut_complain ("warning: %s", range);
  switch (order->format)
    {
    case UT_FORMAT_JSON:
      return ut_print_text (ut_report_gains_json (gains));
    case UT_FORMAT_CSV:
      return ut_print_text (ut_report_gains_csv (gains));
    case UT_FORMAT_TEXT:
      break;
    }
  return ut_print_text (ut_report_gains_text (gains));
}

UtExit
ut_verb_path (const UtOrder *order)
{
  g_autoptr (UtPlan) plan = (UtPlan *) open_plan (order);
  int cell, terminal;

  if (plan == NULL)
    return UT_EXIT_BAD_PLAN;
  cell = ut_plan_find_cell (plan, order->arguments[1]);
  terminal = ut_plan_find_terminal (plan, order->arguments[2]);
  if (cell < 0)
    ut_complain ("%s: there is no cell \"%s\"; expected the id of one of its %u cells",
                 order->arguments[0],
                 order->arguments[1],
                 plan->cells->len);
  if (terminal < 0)
    ut_complain ("%s: there is no terminal \"%s\"; expected the id of one of its %u terminals",
                 order->arguments[0],
                 order->arguments[2],
                 plan->terminals->len);
  if (cell < 0 || terminal < 0)
    return UT_EXIT_WRONG_USE;

  g_autoptr (UtWallIndex) index = ut_wall_index_new (plan);
  UtPath path = { 0 };
  ut_path_trace (plan, index, (guint) cell, (guint) terminal, &path);
  warn_all (ut_wall_index_warnings (index));
  if (path.wall_at_antenna)
    ut_complain ("warning: a wall passes through an antenna of this pair; it is counted");
  if (path.outside_range && !path.measured)
    {
      g_autofree char *range = ut_path_range_text (plan, &path);

      ut_complain ("warning: the law %s; this pair lies outside, at %.1f m and %g GHz", range, path.distance_m, plan->carrier->frequency_mhz / 1e3);
    }
  UtExit exit = ut_print_text (order->format == UT_FORMAT_JSON
                              ? ut_report_path_json (plan, (guint) cell, (guint) terminal, &path)
                              : ut_report_path_text (plan, (guint) cell, (guint) terminal, &path));
  ut_path_clear (&path);
  return exit;
}

UtExit
ut_verb_solve (const UtOrder *order)
{
  g_autoptr (UtPlan) plan = (UtPlan *) open_plan (order);

  if (plan == NULL)
    return UT_EXIT_BAD_PLAN;
  g_autoptr (UtStudy) study = ut_study_new (plan, &order->question, NULL);
  char *text = order->format == UT_FORMAT_JSON ? ut_report_study_json (study)
               : order->format == UT_FORMAT_CSV ? ut_report_study_csv (study)
                                                : ut_report_study_text (study);

  warn_all (study->warnings);
  UtExit exit = ut_print_text (text);
  if (exit != UT_EXIT_DONE)
    return exit;
  return ut_study_all_met (study) ? UT_EXIT_DONE : UT_EXIT_NOT_ALL_MET;
}

UtExit
ut_verb_channels (const UtOrder *order)
{
  g_autoptr (UtPlan) plan = (UtPlan *) open_plan (order);
  g_autoptr (GError) error = NULL;
  g_autoptr (GFile) file = order->output != NULL ? g_file_new_for_commandline_arg (order->output) : NULL;

  if (plan == NULL)
    return UT_EXIT_BAD_PLAN;
  g_autoptr (UtGains) gains = ut_gains_new (plan, NULL);
  g_autoptr (UtChannels) channels = ut_channels_new (gains, order->question.direction, order->loop.seed, UT_CHANNELS_MOST_TRIED, NULL);
  warn_all (ut_wall_index_warnings (gains->index));
  if (plan->carrier->channels == 1)
    ut_complain ("warning: the plan has one channel; with carrier.channels above 1 there is something to choose");
  if (file != NULL && !ut_plan_write_file (channels->plan, file, NULL, NULL, &error))
    {
      ut_complain ("%s: cannot be written: %s", order->output, error->message);
      return UT_EXIT_NOT_WRITTEN;
    }
  return ut_print_text (order->format == UT_FORMAT_JSON ? ut_report_channels_json (channels) : ut_report_channels_text (channels, plan));
}

UtExit
ut_verb_control (const UtOrder *order)
{
  g_autoptr (UtPlan) plan = (UtPlan *) open_plan (order);
  UtQuestion question = { .direction = order->question.direction };

  if (plan == NULL)
    return UT_EXIT_BAD_PLAN;
  g_autoptr (UtStudy) study = ut_study_new (plan, &question, NULL);
  g_autoptr (UtControl) control = ut_control_new (study, &order->loop);
  warn_all (ut_wall_index_warnings (study->gains->index));
  for (guint i = 0; i < study->links->len; i++)
    if (ut_study_link (study, i)->cell < 0)
      ut_complain ("warning: terminal %s has no cell that is on; it takes no part",
                   ut_plan_terminal (plan, ut_study_link (study, i)->terminal)->radio.id);
  return ut_print_text (order->format == UT_FORMAT_JSON  ? ut_report_control_json (control)
                     : order->format == UT_FORMAT_CSV ? ut_report_control_csv (control)
                                                      : ut_report_control_text (control));
}

UtExit
ut_verb_page (const UtOrder *order)
{
  g_autoptr (UtPlan) plan = (UtPlan *) open_plan (order);
  g_autoptr (GError) error = NULL;
  g_autofree char *file_name = g_path_get_basename (order->arguments[0]);
  UtPageSetup setup = order->page;

  if (plan == NULL)
    return UT_EXIT_BAD_PLAN;
  g_autoptr (UtStudy) study = ut_study_new (plan, &order->question, NULL);
  warn_all (study->warnings);
  setup.file_name = strcmp (order->arguments[0], "-") == 0 ? NULL : file_name;
  if (ut_page_write_file (study, &setup, order->output, &error))
    return UT_EXIT_DONE;
  ut_complain ("%s: %s", order->output, error->message);
  return g_error_matches (error, G_IO_ERROR, G_IO_ERROR_INVALID_ARGUMENT) ? UT_EXIT_WRONG_USE : UT_EXIT_NOT_WRITTEN;
}

UtExit
ut_verb_powers (const UtOrder *order)
{
  g_autoptr (UtPlan) plan = (UtPlan *) open_plan (order);
  UtQuestion question = { .direction = order->question.direction, .aim = order->question.aim, .hold_db = order->question.hold_db };
  UtCommissioning commissioning;

  if (plan == NULL)
    return UT_EXIT_BAD_PLAN;
  g_autoptr (UtStudy) study = ut_study_new (plan, &question, NULL);
  warn_all (study->warnings);
  if (!ut_study_all_met (study))
    ut_complain ("warning: not all targets are met with these powers; see undertone-cli solve");
  ut_commissioning_make (study, &commissioning);
  UtExit exit = ut_print_text (order->format == UT_FORMAT_JSON  ? ut_report_powers_json (&commissioning, order->ports)
                               : order->format == UT_FORMAT_CSV ? ut_report_powers_csv (&commissioning, order->ports)
                                                                : ut_report_powers_text (&commissioning, order->ports));
  ut_commissioning_clear (&commissioning);
  return exit;
}
