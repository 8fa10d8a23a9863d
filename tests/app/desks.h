/* Desks to begin with, for the tests of this folder. */
#pragma once

#include "desk.h"
#include "plan-read.h"

/* Answers come before the call returns, however slow the build is. */
static inline UtDesk *
at_once (UtDesk *desk)
{
  ut_solving_set_budget (ut_desk_solving (desk), 1e9);
  ut_desk_set_question (desk, &(UtQuestion){ .direction = UT_DIRECTION_UP, .aim = UT_AIM_LEAST_POWER });
  ut_desk_set_question (desk, &(UtQuestion){ .direction = UT_DIRECTION_DOWN, .aim = UT_AIM_LEAST_POWER });
  return desk;
}

static inline UtDesk *
open_desk (const char *name)
{
  g_autofree char *path = g_build_filename (g_getenv ("UT_EXAMPLES"), name, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (GError) error = NULL;
  g_autoptr (UtDocument) document = ut_document_open (file, faults, &error);

  g_assert_no_error (error);
  g_assert_nonnull (document);
  return at_once (ut_desk_new (document));
}

/* An empty plan, answered as the window answers. */
static inline UtDesk *
empty_desk (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_new_empty ();
  g_autoptr (UtDocument) document = ut_document_new (plan);

  return ut_desk_new (document);
}
