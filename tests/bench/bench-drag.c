/* Time from a pointer motion to the finished frame while a cell is dragged: 20 cells, 200 terminals, 1,000 wall pieces, 1600 x 1000.
 * Prints the median and the 95th percentile, and where the time goes; never fails for a time. */
#include <stdio.h>
#include <stdlib.h>

#include <gtk/gtk.h>

#include "application.h"
#include "bench-site.h"
#include "window.h"

#define RUNS 120

typedef struct
{
  gint64 painted_us; /* when the last frame was finished */
  gint64 begun_us;   /* when it began */
} Frames;

static void
before_paint_cb (GdkFrameClock *clock, Frames *frames)
{
  (void) clock;
  frames->begun_us = g_get_monotonic_time ();
}

static void
after_paint_cb (GdkFrameClock *clock, Frames *frames)
{
  (void) clock;
  frames->painted_us = g_get_monotonic_time ();
}

static GtkEventController *
primary_drag (GtkWidget *widget)
{
  g_autoptr (GListModel) controllers = gtk_widget_observe_controllers (widget);

  for (guint i = 0; i < g_list_model_get_n_items (controllers); i++)
    {
      g_autoptr (GtkEventController) controller = g_list_model_get_item (controllers, i);
      if (GTK_IS_GESTURE_DRAG (controller) && gtk_gesture_single_get_button (GTK_GESTURE_SINGLE (controller)) == GDK_BUTTON_PRIMARY)
        return controller;
    }
  return NULL;
}

static int
compare_times (const void *one, const void *other)
{
  double a = *(const double *) one, b = *(const double *) other;

  return (a > b) - (a < b);
}

static void
print_times (const char *what, double *times_ms)
{
  qsort (times_ms, RUNS, sizeof *times_ms, compare_times);
  printf ("  %-44s median %6.2f ms   95th %6.2f ms\n", what, times_ms[RUNS / 2], times_ms[RUNS * 95 / 100]);
}

int
main (void)
{
  g_autoptr (UtPlan) plan = (UtPlan *) bench_site (20, 200);
  g_autoptr (UtDocument) document = ut_document_new (plan);
  g_autoptr (UtApplication) application = NULL;
  double handled_ms[RUNS], drawn_ms[RUNS], whole_ms[RUNS], x_px, y_px;
  Frames frames = { 0 };

  gtk_init ();
  application = ut_application_new ();
  g_application_register (G_APPLICATION (application), NULL, NULL);
  UtWindow *window = ut_window_new (application, document);
  UtSheet *sheet = ut_window_sheet (window);
  gtk_window_set_default_size (GTK_WINDOW (window), 1600, 1000);
  gtk_window_present (GTK_WINDOW (window));
  for (gint64 until = g_get_monotonic_time () + 1500000; g_get_monotonic_time () < until;)
    g_main_context_iteration (NULL, FALSE);

  GdkFrameClock *clock = gtk_widget_get_frame_clock (GTK_WIDGET (window));
  g_signal_connect (clock, "before-paint", G_CALLBACK (before_paint_cb), &frames);
  g_signal_connect (clock, "after-paint", G_CALLBACK (after_paint_cb), &frames);
  GtkEventController *drag = primary_drag (GTK_WIDGET (sheet));
  const UtRadio *cell = &ut_plan_cell (plan, 7)->radio;
  ut_view_to_sheet (ut_sheet_view (sheet), cell->x_m, cell->y_m, &x_px, &y_px);
  g_signal_emit_by_name (drag, "drag-begin", x_px, y_px);
  for (int run = 0; run < RUNS; run++)
    {
      gint64 begun = g_get_monotonic_time ();

      g_signal_emit_by_name (drag, "drag-update", 5.0 + run, 3.0 + 0.5 * run);
      gint64 handled = g_get_monotonic_time ();
      frames.painted_us = 0;
      while (frames.painted_us == 0)
        g_main_context_iteration (NULL, TRUE);
      /* Waiting for the frame's turn is the display's time, not ours. */
      handled_ms[run] = (double) (handled - begun) / 1e3;
      drawn_ms[run] = (double) (frames.painted_us - frames.begun_us) / 1e3;
      whole_ms[run] = handled_ms[run] + drawn_ms[run];
    }
  g_signal_emit_by_name (drag, "drag-end", 5.0 + RUNS, 3.0 + 0.5 * RUNS);

  printf ("dragging a cell: %d cells, %d terminals, %d wall pieces, sheet %d x %d, %d motions\n", 20, 200, 4 * N_WALLS,
          gtk_widget_get_width (GTK_WIDGET (sheet)), gtk_widget_get_height (GTK_WIDGET (sheet)), RUNS);
  print_times ("motion to finished frame", whole_ms);
  print_times ("  of that, the answer and the table", handled_ms);
  print_times ("  of that, layout and drawing", drawn_ms);
  return 0;
}
