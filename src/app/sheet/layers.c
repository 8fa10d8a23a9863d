#include "layers.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n.h>

#include "labels.h"
#include "marks.h"
#include "plan-painter.h"
#include "report.h"
#include "storey-edits.h"
#include "text.h"


void
ut_still_layer_clear (UtStillLayer *layer)
{
  g_clear_pointer (&layer->node, gsk_render_node_unref);
  g_clear_pointer (&layer->plan, ut_plan_unref);
}

static UtPaintOptions
paint_options (const UtScene *scene)
{
  return (UtPaintOptions){
    .storey = scene->storey,
    .units_per_m = scene->view->scale_px_m,
    .origin_x = scene->view->origin_x_px,
    .origin_y = scene->view->origin_y_px,
    .mark = UT_MARK_PX,
    .palette = scene->palette,
  };
}

static gboolean
same_view (const UtView *one, const UtView *other)
{
  return !(one->width_px < other->width_px || one->width_px > other->width_px || one->height_px < other->height_px
           || one->height_px > other->height_px || one->scale_px_m < other->scale_px_m || one->scale_px_m > other->scale_px_m
           || one->origin_x_px < other->origin_x_px || one->origin_x_px > other->origin_x_px || one->origin_y_px < other->origin_y_px
           || one->origin_y_px > other->origin_y_px);
}

static gboolean
same_ghost (const UtStillLayer *layer, const UtScene *scene, const UtPlan *plan)
{
  int below = ut_plan_storey_below (plan, scene->storey);

  return !scene->ghost
         || (ut_plan_storey_below (layer->plan, scene->storey) == below
             && (below < 0 || layer->plan->storeys->pdata[below] == plan->storeys->pdata[below]));
}

/* The kept picture still shows what it should: moving a radio changes neither storeys nor constructions. */
static gboolean
still_holds (const UtStillLayer *layer, const UtScene *scene, const UtPlan *plan)
{
  return layer->node != NULL && layer->storey == scene->storey && layer->palette == scene->palette && layer->device_scale == scene->device_scale
         && same_view (&layer->view, scene->view) && layer->plan->storeys->len == plan->storeys->len
         && layer->plan->storeys->pdata[scene->storey] == plan->storeys->pdata[scene->storey] && same_ghost (layer, scene, plan) && layer->plan->constructions->len == plan->constructions->len
         && (plan->constructions->len == 0 || memcmp (layer->plan->constructions->pdata, plan->constructions->pdata, plan->constructions->len * sizeof (gpointer)) == 0);
}

/* The walls of the storey below, faint. */
static void
draw_ghost (cairo_t *cr, const UtPlan *plan, UtPaintOptions options)
{
  int below = ut_plan_storey_below (plan, options.storey);

  if (below < 0)
    return;
  options.storey = (guint) below;
  options.grid = FALSE;
  cairo_push_group (cr);
  ut_paint_plan (cr, plan, NULL, &options);
  cairo_pop_group_to_source (cr);
  cairo_paint_with_alpha (cr, 0.22);
}

static void
make_still_layer (UtStillLayer *layer, const UtScene *scene, const UtPlan *plan)
{
  UtPaintOptions options = paint_options (scene);
  graphene_rect_t bounds = GRAPHENE_RECT_INIT (0, 0, (float) scene->view->width_px, (float) scene->view->height_px);
  int width = MAX ((int) ceil (scene->view->width_px), 1) * scene->device_scale, height = MAX ((int) ceil (scene->view->height_px), 1) * scene->device_scale;
  cairo_surface_t *picture = cairo_image_surface_create (CAIRO_FORMAT_RGB24, width, height);
  cairo_t *cr;

  cairo_surface_set_device_scale (picture, scene->device_scale, scene->device_scale);
  cr = cairo_create (picture);
  cairo_set_source_rgb (cr, scene->palette->sheet.red, scene->palette->sheet.green, scene->palette->sheet.blue);
  cairo_paint (cr);
  options.grid = options.walls = options.plates = TRUE;
  if (scene->ghost)
    draw_ghost (cr, plan, options);
  ut_paint_plan (cr, plan, NULL, &options);
  cairo_destroy (cr);

  ut_still_layer_clear (layer);
  layer->node = gsk_cairo_node_new (&bounds);
  cr = gsk_cairo_node_get_draw_context (layer->node);
  cairo_set_source_surface (cr, picture, 0, 0);
  cairo_paint (cr);
  cairo_destroy (cr);
  cairo_surface_destroy (picture);
  layer->plan = ut_plan_ref (plan);
  layer->view = *scene->view;
  layer->palette = scene->palette;
  layer->storey = scene->storey;
  layer->device_scale = scene->device_scale;
}

/* ---- who interferes with the selected link ---- */

static void
draw_arrow (cairo_t *cr, double x0, double y0, double x1, double y1, double width)
{
  double length = hypot (x1 - x0, y1 - y0), head = MIN (6 + 2 * width, length / 2);
  double ux = (x1 - x0) / MAX (length, 1), uy = (y1 - y0) / MAX (length, 1);

  cairo_set_line_width (cr, width);
  cairo_move_to (cr, x0, y0);
  cairo_line_to (cr, x1 - ux * head, y1 - uy * head);
  cairo_stroke (cr);
  cairo_move_to (cr, x1, y1);
  cairo_line_to (cr, x1 - ux * head - uy * head / 2, y1 - uy * head + ux * head / 2);
  cairo_line_to (cr, x1 - ux * head + uy * head / 2, y1 - uy * head - ux * head / 2);
  cairo_close_path (cr);
  cairo_fill (cr);
}

/* The link of the one terminal that is selected, or NULL. */
static const UtLinkAnswer *
selected_link (const UtScene *scene, const UtStudy *study)
{
  UtSelection *selection = ut_desk_selection (scene->desk);

  if (study == NULL || ut_selection_size (selection) != 1 || ut_selection_pick (selection, 0)->kind != UT_KIND_TERMINAL)
    return NULL;
  for (guint i = 0; i < study->links->len; i++)
    {
      const UtLinkAnswer *link = ut_study_link (study, i);

      if (g_str_equal (ut_plan_terminal (study->gains->plan, link->terminal)->radio.id, ut_selection_pick (selection, 0)->id))
        return link->cell >= 0 ? link : NULL;
    }
  return NULL;
}

/* Beside the arrow, where it is free. */
static void
label_arrow (const UtScene *scene, cairo_t *cr, GArray *boxes, const char *text, double x0, double y0, double x1, double y1)
{
  static const double parts[] = { 0.35, 0.25, 0.45, 0.55, 0.15 };
  double corners[2 * G_N_ELEMENTS (parts)][2], width = ut_text_width (text, 12), x, y;

  for (gsize i = 0; i < G_N_ELEMENTS (parts); i++)
    {
      double on_x = x0 + parts[i] * (x1 - x0), on_y = y0 + parts[i] * (y1 - y0);

      corners[2 * i][0] = on_x + 6;
      corners[2 * i][1] = on_y - 7;
      corners[2 * i + 1][0] = on_x - width - 6;
      corners[2 * i + 1][1] = on_y - 7;
    }
  if (ut_boxes_place (boxes, (const double (*)[2]) corners, G_N_ELEMENTS (corners), width, 16, &x, &y))
    ut_text_draw (cr, text, x, y, 12, &scene->palette->ink, &scene->palette->sheet);
}

/* An arrow from each interferer to the receiver: its width the share of the interference, its dBm beside it. Those under a hundredth are left out. */
static void
draw_interferers (const UtScene *scene, cairo_t *cr, GArray *boxes)
{
  const UtStudy *study = ut_desk_answer (scene->desk);
  const UtLinkAnswer *link = selected_link (scene, study);
  const UtPlan *plan = ut_desk_plan (scene->desk);
  gboolean down;
  const UtRadio *receiver;
  double x1, y1;

  if (link == NULL)
    return;
  down = study->question.direction == UT_DIRECTION_DOWN;
  receiver = down ? &ut_plan_terminal (plan, link->terminal)->radio : &ut_plan_cell (plan, (guint) link->cell)->radio;
  ut_scene_place (scene, receiver, &x1, &y1);
  for (guint i = link->interferers->len; i-- > 0;)
    {
      const UtInterferer *one = &g_array_index (link->interferers, UtInterferer, i);
      const UtRadio *sender = ut_plan_radio (plan, down ? UT_KIND_CELL : UT_KIND_TERMINAL, one->id);
      double share = pow (10, (one->dbm - link->interference_dbm) / 10), x0, y0;
      g_autofree char *figure = ut_report_figure (one->dbm, 1);
      g_autofree char *text = g_strdup_printf ("%s %s dBm", one->id, figure);

      if (sender == NULL || share < 0.01 || !ut_scene_has (scene, plan, sender) || !ut_scene_has (scene, plan, receiver))
        continue;
      ut_scene_place (scene, sender, &x0, &y0);
      ut_scene_colour (cr, &scene->palette->ink, 0.45);
      draw_arrow (cr, x0, y0, x1, y1, 1 + 7 * share);
      label_arrow (scene, cr, boxes, text, x0, y0, x1, y1);
    }
}

/* ---- corner: key, scale bar, north ---- */

#define KEY_TEXT_PX 11.0
#define KEY_ROW_PX 20.0
#define KEY_LINE_PX 28.0
/* The last one stands for the words about the figures. */
static const UtMarginClass key_classes[] = { UT_MARGIN_FAR_SHORT, UT_MARGIN_SHORT, UT_MARGIN_TIGHT, UT_MARGIN_EASY, UT_N_MARGINS };

static const char *
figure_words (void)
{
  return _ ("+1.5 (2.0): margin, in brackets reserve, dB");
}

static double
key_entry_width (UtMarginClass margin)
{
  if (margin == UT_N_MARGINS)
    return ut_text_width (figure_words (), KEY_TEXT_PX) + 14;
  return KEY_LINE_PX + 6 + ut_text_width (ut_margin_words (margin), KEY_TEXT_PX) + 14;
}

/* The key is a strip along the lower edge, in as many rows as the width asks for: it hides nothing of the plan that a fitted view shows. */
static guint
key_rows (double width_px)
{
  double x = 0;
  guint rows = 1;

  for (gsize i = 0; i < G_N_ELEMENTS (key_classes); i++)
    {
      double entry = key_entry_width (key_classes[i]);

      if (x + entry > width_px - 2 * UT_CORNER_PX && x > 0)
        {
          rows++;
          x = 0;
        }
      x += entry;
    }
  return rows;
}

double
ut_scene_key_height (double width_px)
{
  return KEY_ROW_PX * key_rows (width_px) + 6;
}

static void
draw_key_entry (const UtScene *scene, cairo_t *cr, UtMarginClass margin, double x, double y)
{
  double dashes[4], width;
  int n_dashes;

  if (margin == UT_N_MARGINS)
    {
      ut_text_draw (cr, figure_words (), x, y - 7, KEY_TEXT_PX, &scene->palette->ink, NULL);
      return;
    }
  ut_margin_line (margin, dashes, &n_dashes, &width);
  for (int k = 0; k < n_dashes; k++)
    dashes[k] *= UT_MARK_PX;
  cairo_set_dash (cr, dashes, n_dashes, 0);
  cairo_set_line_width (cr, width * UT_MARK_PX);
  ut_scene_colour (cr, &scene->palette->margin[margin], 1);
  cairo_move_to (cr, x, y);
  cairo_line_to (cr, x + KEY_LINE_PX, y);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
  ut_text_draw (cr, ut_margin_words (margin), x + KEY_LINE_PX + 6, y - 7, KEY_TEXT_PX, &scene->palette->ink, NULL);
}

static void
draw_key (const UtScene *scene, cairo_t *cr)
{
  double width_px = scene->view->width_px, height_px = ut_scene_key_height (width_px), top_px = scene->view->height_px - height_px;
  double x = UT_CORNER_PX, y = top_px + 3 + KEY_ROW_PX / 2;

  ut_scene_colour (cr, &scene->palette->sheet, 1);
  cairo_rectangle (cr, 0, top_px, width_px, height_px);
  cairo_fill (cr);
  ut_scene_colour (cr, &scene->palette->faint_ink, 0.5);
  cairo_set_line_width (cr, 1);
  cairo_move_to (cr, 0, top_px + 0.5);
  cairo_line_to (cr, width_px, top_px + 0.5);
  cairo_stroke (cr);
  for (gsize i = 0; i < G_N_ELEMENTS (key_classes); i++)
    {
      double entry = key_entry_width (key_classes[i]);

      if (x + entry > width_px - UT_CORNER_PX && x > UT_CORNER_PX)
        {
          x = UT_CORNER_PX;
          y += KEY_ROW_PX;
        }
      draw_key_entry (scene, cr, key_classes[i], x, y);
      x += entry;
    }
}

static void
draw_scale_bar (const UtScene *scene, cairo_t *cr)
{
  double length_m = ut_view_round_length_m (scene->view, 120), length_px = length_m * scene->view->scale_px_m;
  double x = UT_CORNER_PX, y = scene->view->height_px - ut_scene_key_height (scene->view->width_px) - UT_CORNER_PX;
  g_autofree char *text = length_m < 1 ? g_strdup_printf ("%g cm", length_m * 100) : g_strdup_printf ("%g m", length_m);

  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_set_line_width (cr, 2);
  cairo_move_to (cr, x, y - 6);
  cairo_line_to (cr, x, y);
  cairo_line_to (cr, x + length_px, y);
  cairo_line_to (cr, x + length_px, y - 6);
  cairo_stroke (cr);
  ut_text_draw (cr, text, x + length_px + 8, y - 11, 12, &scene->palette->ink, &scene->palette->sheet);
}

static void
draw_north (const UtScene *scene, cairo_t *cr)
{
  double turn = ut_desk_plan (scene->desk)->site->north_deg * G_PI / 180;

  cairo_save (cr);
  cairo_translate (cr, scene->view->width_px - 28, 34);
  cairo_rotate (cr, turn);
  ut_scene_colour (cr, &scene->palette->ink, 1);
  cairo_move_to (cr, 0, -16);
  cairo_line_to (cr, 6, 10);
  cairo_line_to (cr, 0, 5);
  cairo_line_to (cr, -6, 10);
  cairo_close_path (cr);
  cairo_fill (cr);
  cairo_restore (cr);
  ut_text_draw (cr, "N", scene->view->width_px - 32, 48, 12, &scene->palette->ink, &scene->palette->sheet);
}

/* ---- all of it ---- */

/* While an answer is being renewed the links of the old one stay, faint and without figures, where they were. */
static void
draw_old_links (const UtScene *scene, cairo_t *cr, UtPaintOptions options)
{
  UtStudy *old = ut_solving_study (ut_desk_solving (scene->desk));

  if (ut_desk_answer (scene->desk) != NULL || old == NULL || scene->storey >= old->gains->plan->storeys->len)
    return;
  options.radios = options.labels = FALSE;
  cairo_push_group (cr);
  ut_paint_plan (cr, old->gains->plan, old, &options);
  cairo_pop_group_to_source (cr);
  cairo_paint_with_alpha (cr, 0.3);
}

static void
draw_living (const UtScene *scene, cairo_t *cr)
{
  const UtPlan *plan = ut_desk_plan (scene->desk);
  UtPaintOptions options = paint_options (scene);

  g_autoptr (GArray) boxes = ut_boxes_new ();

  options.links = options.radios = options.labels = TRUE;
  options.plates = options.reserves = TRUE;
  options.boxes = boxes;
  ut_paint_take_radios (boxes, plan, &options);
  ut_scene_take_marks (scene, boxes);
  draw_interferers (scene, cr, boxes);
  draw_old_links (scene, cr, options);
  ut_paint_plan (cr, plan, ut_desk_shown (scene->desk), &options);
  ut_scene_draw_marks (scene, cr);
  draw_key (scene, cr);
  draw_scale_bar (scene, cr);
  draw_north (scene, cr);
  if (scene->focused)
    {
      ut_scene_colour (cr, &scene->palette->ink, 0.6);
      cairo_set_line_width (cr, 2);
      cairo_rectangle (cr, 1, 1, scene->view->width_px - 2, scene->view->height_px - 2);
      cairo_stroke (cr);
    }
}

void
ut_scene_snapshot (const UtScene *scene, UtStillLayer *still, GtkSnapshot *snapshot)
{
  const UtPlan *plan = ut_desk_plan (scene->desk);
  graphene_rect_t bounds = GRAPHENE_RECT_INIT (0, 0, (float) scene->view->width_px, (float) scene->view->height_px);
  cairo_t *cr;

  if (!still_holds (still, scene, plan))
    make_still_layer (still, scene, plan);
  gtk_snapshot_append_node (snapshot, still->node);
  cr = gtk_snapshot_append_cairo (snapshot, &bounds);
  draw_living (scene, cr);
  cairo_destroy (cr);
}
