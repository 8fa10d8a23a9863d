/* Clipboard, order, storeys, backdrop, measuring and many things at once: from plan to plan, without a window. */
#include <math.h>
#include <string.h>

#include <cairo.h>
#include <glib/gstdio.h>

#include "arrange.h"
#include "backdrop-edits.h"
#include "backdrop-tool.h"
#include "desks.h"
#include "fields.h"
#include "fragment.h"
#include "measure-tool.h"
#include "path.h"
#include "plan-edit.h"
#include "plan-read.h"
#include "plan-write.h"
#include "storey-edits.h"
#include "wall-edits.h"

static const UtRadio *
radio (const UtPlan *plan, UtRadioKind kind, const char *id)
{
  const UtRadio *found = ut_plan_radio (plan, kind, id);

  g_assert_nonnull (found);
  return found;
}

static void
assert_is_plan (const UtPlan *plan)
{
  gsize length;
  g_autofree char *text = ut_plan_write (plan, &length);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) again = (UtPlan *) ut_plan_read (text, length, faults);

  g_assert_cmpuint (faults->len, ==, 0);
  g_assert_nonnull (again);
}

static void
select_text (UtDesk *desk, const char *text)
{
  ut_selection_set_text (ut_desk_selection (desk), text);
}

/* A part is a plan of its own with what it needs and nothing else, and comes into another plan under ids of its own. */
static void
test_fragment (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone"), other = empty_desk ();
  const UtPlan *plan = ut_desk_plan (desk);
  g_autofree char *walls = ut_wall_pick_id (plan, 0, 1), *text = g_strdup_printf ("cell C2\nterminal T1\nterminal T2\nwall %s", walls), *added = NULL, *again = NULL;

  select_text (desk, text);
  g_autoptr (UtPlan) part = (UtPlan *) ut_plan_fragment (plan, ut_desk_selection (desk));
  assert_is_plan (part);
  g_assert_cmpuint (part->cells->len, ==, 1);
  g_assert_cmpuint (part->terminals->len, ==, 2);
  g_assert_cmpuint (ut_plan_storey (part, 0)->walls->len, ==, 1);
  for (guint i = 0; i < part->constructions->len; i++)
    g_assert_cmpuint (ut_plan_uses_of_construction (part, ut_plan_construction (part, i)->id), >, 0);
  for (guint i = 0; i < part->antennas->len; i++)
    g_assert_cmpuint (ut_plan_uses_of_antenna (part, ut_plan_antenna (part, i)->id), >, 0);

  g_autoptr (UtPlan) pasted = (UtPlan *) ut_plan_with_fragment (ut_desk_plan (other), part, 0, 1, -2, FALSE, &added);
  assert_is_plan (pasted);
  g_assert_cmpuint (pasted->constructions->len, ==, part->constructions->len);
  g_assert_cmpfloat_with_epsilon (radio (pasted, UT_KIND_CELL, "C1")->x_m, radio (plan, UT_KIND_CELL, "C2")->x_m + 1, 1e-9);
  g_assert_cmpfloat_with_epsilon (radio (pasted, UT_KIND_TERMINAL, "T2")->y_m, radio (plan, UT_KIND_TERMINAL, "T2")->y_m - 2, 1e-9);
  /* Once more: ids go on, constructions are those that are there. */
  g_autoptr (UtPlan) twice = (UtPlan *) ut_plan_with_fragment (pasted, part, 0, 5, 5, FALSE, &again);
  assert_is_plan (twice);
  g_assert_cmpuint (twice->constructions->len, ==, part->constructions->len);
  g_assert_cmpuint (twice->antennas->len, ==, part->antennas->len);
  g_assert_cmpstr (again, ==, "wall S1\x1fW2\ncell C2\nterminal T3\nterminal T4\n");
  /* A construction of the same id that is another one comes under a new id. */
  UtConstruction *changed = ut_construction_copy (ut_plan_construction (pasted, 0));
  changed->loss_db = 77;
  g_ptr_array_set_size (changed->layers, 0);
  g_autoptr (UtPlan) differing = (UtPlan *) ut_plan_with_construction (pasted, 0, changed);
  g_free (again);
  g_autoptr (UtPlan) third = (UtPlan *) ut_plan_with_fragment (differing, part, 0, 0, 0, FALSE, &again);
  assert_is_plan (third);
  g_assert_cmpuint (third->constructions->len, ==, part->constructions->len + 1);
}

/* Duplicates keep the serving cell that was chosen, or take the one duplicated with them. */
static void
test_duplicate (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  g_autofree char *refusal = NULL;
  const UtPlan *plan;

  ut_desk_apply (desk, ut_fields_with (ut_desk_plan (desk), UT_SUBJECT_TERMINAL, "T1", 0, "2", &refusal), "Serve", NULL);
  g_assert_cmpstr (ut_plan_terminal (ut_desk_plan (desk), 0)->cell, ==, "C2");
  select_text (desk, "terminal T1");
  ut_desk_duplicate_selected (desk);
  plan = ut_desk_plan (desk);
  g_assert_cmpstr (ut_plan_terminal (plan, plan->terminals->len - 1)->cell, ==, "C2");
  g_assert_true (ut_selection_has (ut_desk_selection (desk), UT_KIND_TERMINAL, "T15"));
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Duplicate T15");
  select_text (desk, "cell C2\nterminal T1");
  ut_desk_duplicate_selected (desk);
  plan = ut_desk_plan (desk);
  g_assert_cmpstr (ut_plan_terminal (plan, plan->terminals->len - 1)->cell, ==, "C5");
  assert_is_plan (plan);
  ut_desk_undo (desk);
  ut_desk_undo (desk);
  ut_desk_undo (desk);
  g_assert_false (ut_document_is_modified (ut_desk_document (desk)));
}

static void
test_arrange (void)
{
  g_autoptr (UtDesk) desk = empty_desk ();
  const double x[] = { 1, 2, 9, 5 }, y[] = { 4, 8, 6, 5 };
  g_autofree char *added = NULL;

  for (int i = 0; i < 4; i++)
    ut_desk_place (desk, UT_KIND_CELL, "S1", x[i], y[i]);
  select_text (desk, "cell C1\ncell C2\ncell C3\ncell C4");
  for (UtAlign align = 0; align < UT_N_ALIGNS; align++)
    {
      static const double wanted[] = { 1, 5, 9, 4, 6, 8 };
      g_autoptr (UtPlan) aligned = (UtPlan *) ut_plan_aligned (ut_desk_plan (desk), ut_desk_selection (desk), align);

      for (int i = 0; i < 4; i++)
        {
          const UtRadio *cell = &ut_plan_cell (aligned, (guint) i)->radio;

          g_assert_cmpfloat_with_epsilon (align < UT_ALIGN_BOTTOM ? cell->x_m : cell->y_m, wanted[align], 1e-9);
          g_assert_cmpfloat_with_epsilon (align < UT_ALIGN_BOTTOM ? cell->y_m : cell->x_m, align < UT_ALIGN_BOTTOM ? y[i] : x[i], 1e-9);
        }
    }
  g_autoptr (UtPlan) distributed = (UtPlan *) ut_plan_distributed (ut_desk_plan (desk), ut_desk_selection (desk), TRUE);
  const double even[] = { 1, 3.667, 9, 6.333 };
  for (int i = 0; i < 4; i++)
    g_assert_cmpfloat_with_epsilon (ut_plan_cell (distributed, (guint) i)->radio.x_m, even[i], 1e-9);
  select_text (desk, "cell C1");
  g_autoptr (UtPlan) repeated = (UtPlan *) ut_plan_repeated (ut_desk_plan (desk), ut_desk_selection (desk), 0, 3, 2, 4, 5, &added);
  g_assert_cmpuint (repeated->cells->len, ==, 4 + 5);
  g_assert_cmpfloat_with_epsilon (radio (repeated, UT_KIND_CELL, "C9")->x_m, 1 + 2 * 4, 1e-9);
  g_assert_cmpfloat_with_epsilon (radio (repeated, UT_KIND_CELL, "C9")->y_m, 4 + 5, 1e-9);
  assert_is_plan (repeated);
}

static const UtPlan *
with_wall (const UtPlan *plan, const double (*points)[2], guint n)
{
  g_autoptr (GArray) list = g_array_new (FALSE, FALSE, sizeof (UtPoint));
  g_autofree char *id = NULL;

  for (guint i = 0; i < n; i++)
    {
      UtPoint point = { points[i][0], points[i][1] };

      g_array_append_val (list, point);
    }
  return ut_plan_with_new_wall (plan, 0, list, &id);
}

/* Whichever ends meet, joining gives one line with every opening where it was; and splitting it again gives two. */
static void
test_join (void)
{
  static const double a[][2] = { { 0, 0 }, { 4, 0 } }, a_back[][2] = { { 4, 0 }, { 0, 0 } }, b[][2] = { { 4, 0 }, { 4, 3 }, { 8, 3 } }, b_back[][2] = { { 8, 3 }, { 4, 3 }, { 4, 0 } };
  static const double away[][2] = { { 20, 0 }, { 24, 0 } };

  for (int turn = 0; turn < 4; turn++)
    {
      g_autoptr (UtPlan) empty = (UtPlan *) ut_plan_new_empty ();
      g_autoptr (UtPlan) one = (UtPlan *) with_wall (empty, turn % 2 ? a_back : a, 2);
      g_autoptr (UtPlan) two = (UtPlan *) with_wall (one, turn / 2 ? b_back : b, 3);
      g_autoptr (UtPlan) door = (UtPlan *) ut_plan_with_opening (two, 0, 1, turn / 2 ? 7 - 2.5 : 1.5, turn / 2 ? 7 - 1.5 : 2.5); /* in the middle of the first piece of b */
      g_autoptr (UtPlan) joined = (UtPlan *) ut_plan_with_walls_joined (door, 0, 0, 1);
      const UtWall *wall;
      double near_m;

      g_assert_nonnull (joined);
      assert_is_plan (joined);
      g_assert_cmpuint (ut_plan_storey (joined, 0)->walls->len, ==, 1);
      wall = ut_plan_storey (joined, 0)->walls->pdata[0];
      g_assert_cmpuint (wall->points->len, ==, 4);
      g_assert_cmpfloat_with_epsilon (ut_wall_length_m (wall), 11, 1e-9);
      /* The door is 1.5 m to 2.5 m along b, which begins 4 m along the whole, or 7 m from the other end. */
      near_m = hypot (g_array_index (wall->points, UtPoint, 0).x_m, g_array_index (wall->points, UtPoint, 0).y_m) < 1e-9 ? 4 + 1.5 : 11 - 4 - 2.5;
      g_assert_cmpfloat_with_epsilon (((const UtOpening *) wall->openings->pdata[0])->at_m, near_m, 1e-9);
      g_autoptr (UtPlan) split = (UtPlan *) ut_plan_with_wall_split (joined, 0, 0, 1);
      g_assert_cmpuint (ut_plan_storey (split, 0)->walls->len, ==, 2);
    }
  g_autoptr (UtPlan) empty = (UtPlan *) ut_plan_new_empty ();
  g_autoptr (UtPlan) one = (UtPlan *) with_wall (empty, a, 2);
  g_autoptr (UtPlan) apart = (UtPlan *) with_wall (one, away, 2);
  g_assert_null (ut_plan_with_walls_joined (apart, 0, 0, 1));
}

static void
test_storeys (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  const UtPlan *plan = ut_desk_plan (desk);
  const UtStorey *ground = ut_plan_storey (plan, 0);
  guint index;
  g_autoptr (UtPlan) added = (UtPlan *) ut_plan_with_new_storey (plan, &index);
  g_autoptr (UtPlan) copied = (UtPlan *) ut_plan_with_storey_copied (added, 0, &index);
  g_autoptr (UtPlan) moved = (UtPlan *) ut_plan_with_storey_moved (copied, 0, 2, -1);
  g_autoptr (UtPlan) turned = (UtPlan *) ut_plan_with_storey_at (copied, 2, 0);
  g_autoptr (UtPlan) without = (UtPlan *) ut_plan_without_storey (copied, 0);

  assert_is_plan (copied);
  assert_is_plan (without);
  g_assert_cmpfloat_with_epsilon (ut_plan_storey (copied, 2)->elevation_m, ground->elevation_m + 2 * ground->height_m, 1e-9);
  g_assert_cmpuint (ut_plan_storey (copied, 2)->walls->len, ==, ground->walls->len);
  g_assert_cmpint (ut_plan_storey_below (copied, 2), ==, 1);
  g_assert_cmpint (ut_plan_storey_below (copied, 0), ==, -1);
  g_assert_cmpfloat_with_epsilon (radio (moved, UT_KIND_CELL, "C1")->x_m, radio (plan, UT_KIND_CELL, "C1")->x_m + 2, 1e-9);
  g_assert_cmpstr (ut_plan_storey (turned, 0)->id, ==, ut_plan_storey (copied, 2)->id);
  g_assert_cmpuint (without->cells->len, ==, 0); /* all of them were there */
  /* The desk shows a storey that there is, whatever is undone. */
  ut_desk_apply (desk, ut_plan_ref (copied), "Storeys", NULL);
  ut_desk_set_storey (desk, 2);
  ut_desk_undo (desk);
  g_assert_cmpuint (ut_desk_storey (desk), ==, 0);
}

/* A grey picture, 400 x 200. */
static UtPicture
picture (void)
{
  g_autofree char *path = NULL, *contents = NULL;
  g_autoptr (GBytes) bytes = NULL;
  g_autoptr (GError) error = NULL;
  cairo_surface_t *surface = cairo_image_surface_create (CAIRO_FORMAT_RGB24, 400, 200);
  UtPicture imported = { 0 };
  gsize length;
  int file = g_file_open_tmp ("picture-XXXXXX.png", &path, &error);

  g_assert_no_error (error);
  g_assert_true (g_close (file, NULL));
  g_assert_cmpint (cairo_surface_write_to_png (surface, path), ==, CAIRO_STATUS_SUCCESS);
  cairo_surface_destroy (surface);
  g_assert_true (g_file_get_contents (path, &contents, &length, NULL));
  g_remove (path);
  bytes = g_bytes_new (contents, length);
  g_assert_true (ut_picture_import (bytes, 0, &imported, &error));
  return imported;
}

/* Lengths on the picture before and after: true where they should be, whatever way it is turned. */
static void
test_backdrop_scale (void)
{
  UtPicture grey = picture ();

  for (int turn = 0; turn < 4; turn++)
    {
      g_autoptr (UtPlan) empty = (UtPlan *) ut_plan_new_empty ();
      g_autoptr (UtPlan) with = (UtPlan *) ut_plan_with_picture (empty, 0, &grey);
      g_autoptr (UtPlan) turned = (UtPlan *) ut_plan_with_backdrop_turned (with, 0, turn * 37.0);
      /* Across and up on the plan, with the same first point; true lengths that say the picture was stretched. */
      UtKnownLength known[2] = { { { 3, 2 }, { 13, 2 }, 12 }, { { 3, 2 }, { 3, 7 }, 5.5 } };
      g_autoptr (UtPlan) scaled = (UtPlan *) ut_plan_with_backdrop_scaled (turned, 0, &known[0]);
      const UtBackdrop *before = ut_plan_storey (turned, 0)->backdrop, *after = ut_plan_storey (scaled, 0)->backdrop;

      g_assert_cmpfloat_with_epsilon (before->width_m, 30, 1e-9);
      g_assert_cmpfloat_with_epsilon (before->height_m, 15, 1e-9);
      assert_is_plan (scaled);
      g_assert_cmpfloat_with_epsilon (after->width_m, 36, 1e-5);
      g_assert_cmpfloat_with_epsilon (after->height_m, 18, 1e-5);
      /* The corner moves away from the fixed point by the same factor. */
      g_assert_cmpfloat_with_epsilon (after->x_m - 3, 1.2 * (before->x_m - 3), 1e-5);
      g_assert_cmpfloat_with_epsilon (after->y_m - 2, 1.2 * (before->y_m - 2), 1e-5);
      if (turn == 0)
        {
          g_autoptr (UtPlan) stretched = (UtPlan *) ut_plan_with_backdrop_stretched (turned, 0, known);

          g_assert_nonnull (stretched);
          g_assert_cmpfloat_with_epsilon (ut_plan_storey (stretched, 0)->backdrop->width_m, 30 * 1.2, 1e-5);
          g_assert_cmpfloat_with_epsilon (ut_plan_storey (stretched, 0)->backdrop->height_m, 15 * 1.1, 1e-5);
        }
      /* Two lengths along one direction tell nothing of the other. */
      known[1] = (UtKnownLength){ { 3, 3 }, { 12, 3.1 }, 10 };
      g_assert_null (ut_plan_with_backdrop_stretched (turned, 0, known));
    }
  ut_picture_clear (&grey);
}

static UtPointer
at (double x_m, double y_m)
{
  return (UtPointer){ .x_m = x_m, .y_m = y_m, .px_per_m = 40 };
}

static void
type (UtBackdropWork *work, const char *text)
{
  for (; *text != '\0'; text++)
    g_assert_true (ut_backdrop_work_type (work, (gunichar) *text));
}

/* As by hand: two clicks and a length; a second length shows how far it is off and changes nothing; stretching makes both true; Undo takes the scale back. */
static void
test_backdrop_tool (void)
{
  g_autoptr (UtDesk) desk = empty_desk ();
  UtPicture grey = picture ();
  UtBackdropWork work = { 0 };
  UtPointer pointer;
  g_autofree char *told = NULL, *off = NULL, *checked = NULL;

  ut_desk_apply (desk, ut_plan_with_picture (ut_desk_plan (desk), 0, &grey), "Add", NULL);
  pointer = at (0, 0);
  ut_backdrop_work_click (&work, desk, &pointer);
  pointer = at (10, 0);
  ut_backdrop_work_click (&work, desk, &pointer);
  told = ut_backdrop_work_text (&work, desk);
  g_assert_nonnull (strstr (told, "10.000 m as drawn"));
  g_assert_false (ut_backdrop_work_type (&work, 'x'));
  type (&work, "20");
  ut_backdrop_work_enter (&work, desk, FALSE);
  g_assert_cmpfloat_with_epsilon (ut_plan_storey (ut_desk_plan (desk), 0)->backdrop->width_m, 60, 1e-5);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Scale Backdrop");
  pointer = at (0, 0);
  ut_backdrop_work_click (&work, desk, &pointer);
  pointer = at (0, 10);
  ut_backdrop_work_click (&work, desk, &pointer);
  type (&work, "8");
  off = ut_backdrop_work_text (&work, desk);
  g_assert_nonnull (strstr (off, "off by 25.00 %"));
  ut_backdrop_work_enter (&work, desk, TRUE);
  g_assert_cmpfloat_with_epsilon (ut_plan_storey (ut_desk_plan (desk), 0)->backdrop->width_m, 60, 1e-5);
  g_assert_cmpfloat_with_epsilon (ut_plan_storey (ut_desk_plan (desk), 0)->backdrop->height_m, 30 * 0.8, 1e-5);
  ut_desk_undo (desk);
  ut_desk_undo (desk);
  checked = ut_backdrop_work_text (&work, desk); /* the scale is gone, and the tool knows */
  g_assert_null (strstr (checked, "In scale"));
  /* A drag moves it, not when it is locked. */
  pointer = at (5, 5);
  ut_backdrop_work_drag (&work, desk, &pointer, TRUE);
  pointer = at (6, 7);
  ut_backdrop_work_drag (&work, desk, &pointer, FALSE);
  ut_backdrop_work_drop (&work, desk);
  g_assert_cmpfloat_with_epsilon (ut_plan_storey (ut_desk_plan (desk), 0)->backdrop->y_m, 2, 1e-9);
  UtBackdrop *locked = ut_backdrop_copy (ut_plan_storey (ut_desk_plan (desk), 0)->backdrop);
  locked->locked = TRUE;
  ut_desk_apply (desk, ut_plan_with_backdrop (ut_desk_plan (desk), 0, locked), "Lock", NULL);
  pointer = at (5, 5);
  ut_backdrop_work_drag (&work, desk, &pointer, TRUE);
  pointer = at (9, 9);
  ut_backdrop_work_drag (&work, desk, &pointer, FALSE);
  ut_backdrop_work_drop (&work, desk);
  g_assert_cmpfloat_with_epsilon (ut_plan_storey (ut_desk_plan (desk), 0)->backdrop->y_m, 2, 1e-9);
  ut_backdrop_work_clear (&work);
  ut_picture_clear (&grey);
}

/* The measure is the path's: between C1 and T1's places, both at the measure's height. */
static void
test_measure (void)
{
  g_autoptr (UtDesk) desk = open_desk ("two-rooms.undertone");
  const UtPlan *plan = ut_desk_plan (desk);
  g_autoptr (UtWallIndex) index = ut_wall_index_new (plan);
  g_autoptr (UtCell) cell = ut_cell_copy (ut_plan_cell (plan, 0));
  g_autoptr (UtTerminal) terminal = ut_terminal_copy (ut_plan_terminal (plan, 1));
  UtMeasure measure = { 0 };
  UtMeasured measured;
  UtPointer pointer = at (cell->radio.x_m, cell->radio.y_m);
  UtPath path = { 0 };

  pointer.no_snap = TRUE;
  ut_measure_begin (&measure, desk, &pointer);
  g_assert_false (ut_measure_result (&measure, desk, &measured));
  pointer.x_m = terminal->radio.x_m;
  pointer.y_m = terminal->radio.y_m;
  ut_measure_update (&measure, desk, &pointer);
  g_assert_true (ut_measure_result (&measure, desk, &measured));
  cell->radio.height_m = terminal->radio.height_m = UT_MEASURE_HEIGHT_M;
  ut_path_compute (plan, index, cell, terminal, &path);
  g_assert_cmpfloat_with_epsilon (measured.length_m, path.distance_m, 1e-9);
  g_assert_cmpfloat_with_epsilon (measured.base_loss_db, path.base_loss_db, 1e-9);
  g_assert_cmpfloat_with_epsilon (measured.crossings_db, path.crossings_db, 1e-9);
  g_assert_cmpuint (measured.n_walls, >, 0);
  g_assert_cmpfloat (measured.crossings_db, >, 0);
}

/* Kept, the radio comes back from the file as it was, under its name and with its antenna; by use only the height is another. */
static void
test_presets (void)
{
  g_autofree char *folder = g_dir_make_tmp ("presets-XXXXXX", NULL), *path = g_build_filename (folder, "below", "presets.undertone", NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (UtPresets) presets = ut_presets_new (file);
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone"), other = empty_desk ();
  const UtRadio *from = radio (ut_desk_plan (desk), UT_KIND_TERMINAL, "T5"), *placed;
  g_autoptr (GError) error = NULL;
  guint n = ut_presets_count (presets);

  for (guint i = 0; i < n; i++)
    ut_desk_place_preset (other, ut_presets_get (presets, i), "S1", i, 1);
  g_assert_cmpuint (ut_desk_plan (other)->terminals->len, ==, n - 1);
  g_assert_cmpfloat (radio (ut_desk_plan (other), UT_KIND_TERMINAL, "T3")->height_m, ==, 2.3);
  for (int twice = 0; twice < 2; twice++)
    {
      g_assert_true (ut_presets_add (presets, ut_desk_plan (desk), UT_KIND_TERMINAL, "T5", &error));
      g_assert_no_error (error);
      g_assert_cmpuint (ut_presets_count (presets), ==, n + 1); /* the same name is the same preset */
    }
  g_assert_true (ut_presets_add (presets, ut_desk_plan (desk), UT_KIND_CELL, "C1", &error));
  g_autoptr (UtPresets) again = ut_presets_new (file);
  g_assert_cmpuint (ut_presets_count (again), ==, n + 2);
  g_assert_cmpstr (ut_presets_get (again, n + 1)->name, ==, from->name);
  ut_desk_place_preset (other, ut_presets_get (again, n + 1), "S1", 7, 8);
  placed = &ut_plan_terminal (ut_desk_plan (other), ut_desk_plan (other)->terminals->len - 1)->radio;
  g_assert_cmpstr (placed->name, ==, from->name);
  g_assert_cmpstr (placed->antenna, ==, from->antenna);
  g_assert_cmpfloat (placed->height_m, ==, from->height_m);
  g_assert_cmpfloat_with_epsilon (placed->x_m, 7, 1e-9);
  assert_is_plan (ut_desk_plan (other));
  g_assert_true (g_file_set_contents (path, "no plan", -1, NULL));
  g_assert_false (ut_presets_add (presets, ut_desk_plan (desk), UT_KIND_CELL, "C1", &error));
  g_assert_nonnull (error);
}

/* A drag by its handle turns a directional antenna to 5 degrees; a link's end goes to the cell it is dropped on; each is one step. */
static void
test_handles (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  UtSelectDrag drag = { 0 };
  g_autofree char *refusal = NULL;
  const UtPlan *plan;
  const UtRadio *cell, *terminal;
  UtPointer pointer;
  double azimuth;

  /* A sector antenna of the plan for C1. */
  UtAntenna *sector = ut_antenna_new ();
  g_free (sector->id);
  sector->id = g_strdup ("sector-90");
  sector->pattern = UT_ANTENNA_SECTOR;
  sector->beamwidth_h_deg = 90;
  sector->beamwidth_v_deg = 30;
  ut_desk_apply (desk, ut_plan_with_antenna (ut_desk_plan (desk), -1, sector), "Antenna", NULL);
  g_autofree char *choice = g_strdup_printf ("%u", ut_desk_plan (desk)->antennas->len);
  ut_desk_apply (desk, ut_fields_with (ut_desk_plan (desk), UT_SUBJECT_CELL, "C1", 4, choice, &refusal), "Choose", NULL);
  g_assert_null (refusal);
  select_text (desk, "cell C1");
  cell = radio (ut_desk_plan (desk), UT_KIND_CELL, "C1");
  azimuth = cell->azimuth_deg * G_PI / 180;
  pointer = at (cell->x_m + UT_TURN_HANDLE_PX / 40 * sin (azimuth), cell->y_m + UT_TURN_HANDLE_PX / 40 * cos (azimuth));
  ut_select_begin (&drag, desk, &pointer);
  g_assert_cmpint (drag.kind, ==, UT_DRAG_TURN);
  pointer = at (cell->x_m + 3, cell->y_m - 3.1); /* 135.9 degrees clockwise from +y */
  ut_select_update (&drag, desk, &pointer);
  ut_select_end (&drag, desk);
  g_assert_cmpfloat_with_epsilon (radio (ut_desk_plan (desk), UT_KIND_CELL, "C1")->azimuth_deg, 135, 1e-9);
  g_assert_cmpstr (ut_document_undo_label (ut_desk_document (desk)), ==, "Turn C1");

  plan = ut_desk_plan (desk);
  UtStudy *study = ut_desk_answer (desk);
  const UtLinkAnswer *link = ut_study_link (study, 0);
  terminal = &ut_plan_terminal (plan, link->terminal)->radio;
  cell = &ut_plan_cell (plan, (guint) link->cell)->radio;
  guint other = link->cell == 0 ? 1 : 0;
  ut_selection_clear (ut_desk_selection (desk));
  /* Three quarters of the way from the terminal to its cell. */
  pointer = at (terminal->x_m + 0.75 * (cell->x_m - terminal->x_m), terminal->y_m + 0.75 * (cell->y_m - terminal->y_m));
  ut_select_begin (&drag, desk, &pointer);
  g_assert_cmpint (drag.kind, ==, UT_DRAG_SERVE);
  g_autofree char *terminal_id = g_strdup (terminal->id);
  pointer = at (ut_plan_cell (plan, other)->radio.x_m, ut_plan_cell (plan, other)->radio.y_m);
  ut_select_update (&drag, desk, &pointer);
  ut_select_end (&drag, desk);
  g_assert_cmpstr (ut_plan_terminal (ut_desk_plan (desk), (guint) ut_plan_find_terminal (ut_desk_plan (desk), terminal_id))->cell, ==, ut_plan_cell (plan, other)->radio.id);
}

static guint
field_index (UtSubject subject, const char *label)
{
  for (guint i = 0; i < ut_fields_count (subject); i++)
    if (g_str_equal (ut_fields_field (subject, i)->label, label))
      return i;
  g_assert_not_reached ();
}

static const UtPlan *
with_field (const UtPlan *plan, UtSubject subject, const char *id, const char *label, const char *text)
{
  g_autofree char *refusal = NULL;
  const UtPlan *with = ut_fields_with (plan, subject, id, field_index (subject, label), text, &refusal);

  g_test_message ("%s: %s", label, refusal != NULL ? refusal : "taken");
  g_assert_true ((with == NULL) == (refusal != NULL));
  return with;
}

/* Several radios at once, bit rates as targets, the planner's own columns, the storey and the site. */
static void
test_many_fields (void)
{
  g_autoptr (UtDesk) desk = open_desk ("cold-store.undertone");
  const UtPlan *plan = ut_desk_plan (desk);
  const char *cells = "C1\nC3", *both = "cell C1\nterminal T2";

  select_text (desk, both);
  g_assert_cmpint (ut_fields_subject (desk), ==, UT_SUBJECT_RADIOS);
  select_text (desk, "cell C1\ncell C3");
  g_assert_cmpint (ut_fields_subject (desk), ==, UT_SUBJECT_CELL);
  g_assert_true (ut_fields_mixed (plan, UT_SUBJECT_CELL, cells, field_index (UT_SUBJECT_CELL, "x")));
  g_autoptr (UtPlan) higher = (UtPlan *) with_field (plan, UT_SUBJECT_CELL, cells, "Height", "4.25");
  g_assert_false (ut_fields_mixed (higher, UT_SUBJECT_CELL, cells, field_index (UT_SUBJECT_CELL, "Height")));
  g_assert_cmpfloat (radio (higher, UT_KIND_CELL, "C1")->height_m, ==, 4.25);
  g_assert_cmpfloat (radio (higher, UT_KIND_CELL, "C3")->height_m, ==, 4.25);
  g_assert_cmpfloat (radio (higher, UT_KIND_CELL, "C2")->height_m, ==, radio (plan, UT_KIND_CELL, "C2")->height_m);
  g_autoptr (UtPlan) off = (UtPlan *) with_field (plan, UT_SUBJECT_RADIOS, both, "On", "0");
  g_assert_false (radio (off, UT_KIND_CELL, "C1")->on || radio (off, UT_KIND_TERMINAL, "T2")->on);
  g_assert_null (with_field (plan, UT_SUBJECT_CELL, cells, "Lowest power", "99"));

  /* 3GPP TR 36.942 annex A: 0.6 log2 (1 + SINR) bit/s/Hz in the downlink, so that 0.6 bit/s/Hz need 0 dB. */
  g_autofree char *rate = g_strdup_printf ("%g Mbit/s", 0.6 * plan->carrier->bandwidth_mhz);
  g_autoptr (UtPlan) fast = (UtPlan *) with_field (plan, UT_SUBJECT_TERMINAL, "T1\nT2", "Downlink target", rate);
  g_assert_cmpfloat_with_epsilon (ut_plan_terminal (fast, 1)->target_down_db, 0, 1e-9);
  g_assert_null (with_field (plan, UT_SUBJECT_TERMINAL, "T1", "Downlink target", "9 Gbit/s"));
  g_assert_null (with_field (plan, UT_SUBJECT_TERMINAL, "T1", "Downlink target", "fast"));

  g_autoptr (UtPlan) own = (UtPlan *) with_field (plan, UT_SUBJECT_CELL, "C1", "Own columns", "cable tag: A-07; rack:3");
  g_autofree char *shown = ut_fields_text (own, UT_SUBJECT_CELL, "C1", field_index (UT_SUBJECT_CELL, "Own columns"));
  g_assert_cmpstr (shown, ==, "cable tag: A-07; rack: 3");
  assert_is_plan (own);
  g_assert_null (with_field (plan, UT_SUBJECT_CELL, "C1", "Own columns", "no colon"));

  g_autoptr (UtPlan) raised = (UtPlan *) with_field (plan, UT_SUBJECT_PLAN, "S1", "Elevation", "4");
  g_assert_cmpfloat (ut_plan_storey (raised, 0)->elevation_m, ==, 4);
  g_autoptr (UtPlan) north = (UtPlan *) with_field (plan, UT_SUBJECT_PLAN, "S1", "North, clockwise from +y", "15");
  g_assert_cmpfloat (north->site->north_deg, ==, 15);
  g_assert_null (with_field (plan, UT_SUBJECT_PLAN, "S1", "Latitude", "91"));
  g_autoptr (UtPlan) client = (UtPlan *) with_field (plan, UT_SUBJECT_PLAN, "S1", "Client", "Nordkai");
  g_assert_cmpstr (client->client, ==, "Nordkai");
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/edits/fragment", test_fragment);
  g_test_add_func ("/edits/duplicate", test_duplicate);
  g_test_add_func ("/edits/arrange", test_arrange);
  g_test_add_func ("/edits/join", test_join);
  g_test_add_func ("/edits/storeys", test_storeys);
  g_test_add_func ("/edits/backdrop-scale", test_backdrop_scale);
  g_test_add_func ("/edits/backdrop-tool", test_backdrop_tool);
  g_test_add_func ("/edits/measure", test_measure);
  g_test_add_func ("/edits/presets", test_presets);
  g_test_add_func ("/edits/handles", test_handles);
  g_test_add_func ("/edits/many-fields", test_many_fields);
  return g_test_run ();
}
