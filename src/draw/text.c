#include "text.h"

#include <pango/pangocairo.h>

/* Laid out texts of this thread, by size, weight and text: an identifier or a figure is shaped once and drawn in every frame. */
typedef struct
{
  PangoContext *context;
  GHashTable *layouts; /* char * → PangoLayout */
} Shaper;

#define LAYOUTS_MOST 4096

static void
shaper_free (gpointer data)
{
  Shaper *shaper = data;

  g_hash_table_unref (shaper->layouts);
  g_object_unref (shaper->context);
  g_free (shaper);
}

static GPrivate shapers = G_PRIVATE_INIT (shaper_free);

/* One user unit is one target unit, whatever the screen. */
static PangoContext *
context_new (void)
{
  PangoContext *context = pango_font_map_create_context (pango_cairo_font_map_get_default ());
  cairo_font_options_t *options = cairo_font_options_create ();

  cairo_font_options_set_hint_metrics (options, CAIRO_HINT_METRICS_OFF);
  cairo_font_options_set_hint_style (options, CAIRO_HINT_STYLE_NONE);
  pango_cairo_context_set_font_options (context, options);
  pango_cairo_context_set_resolution (context, 96);
  pango_context_set_round_glyph_positions (context, FALSE);
  cairo_font_options_destroy (options);
  return context;
}

static Shaper *
shaper_of_thread (void)
{
  Shaper *shaper = g_private_get (&shapers);

  if (shaper == NULL)
    {
      shaper = g_new0 (Shaper, 1);
      shaper->context = context_new ();
      shaper->layouts = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, g_object_unref);
      g_private_set (&shapers, shaper);
    }
  return shaper;
}

static void
set_up (PangoLayout *layout, const char *text, const UtTextStyle *style)
{
  PangoFontDescription *font = pango_font_description_new ();

  pango_font_description_set_family_static (font, "Sans");
  pango_font_description_set_absolute_size (font, style->size * PANGO_SCALE);
  pango_font_description_set_weight (font, style->bold ? PANGO_WEIGHT_BOLD : PANGO_WEIGHT_NORMAL);
  pango_layout_set_font_description (layout, font);
  pango_font_description_free (font);
  pango_layout_set_text (layout, text, -1);
  if (style->width > 0)
    {
      pango_layout_set_width (layout, (int) (style->width * PANGO_SCALE));
      pango_layout_set_wrap (layout, PANGO_WRAP_WORD_CHAR);
      if (!style->wrap)
        pango_layout_set_ellipsize (layout, PANGO_ELLIPSIZE_END);
    }
  else
    pango_layout_set_single_paragraph_mode (layout, TRUE);
}

static void
extent_of (PangoLayout *layout, double *width, double *height)
{
  PangoRectangle logical;

  pango_layout_get_extents (layout, NULL, &logical);
  *width = (double) logical.width / PANGO_SCALE;
  *height = (double) logical.height / PANGO_SCALE;
}

/* The text laid out; borrowed until the next call. */
static PangoLayout *
layout_of (const char *text, const UtTextStyle *style)
{
  Shaper *shaper = shaper_of_thread ();
  g_autofree char *key = g_strdup_printf ("%a %a %d%d %s", style->size, style->width, style->bold, style->wrap, text);
  PangoLayout *layout = g_hash_table_lookup (shaper->layouts, key);

  if (layout != NULL)
    return layout;
  if (g_hash_table_size (shaper->layouts) >= LAYOUTS_MOST)
    g_hash_table_remove_all (shaper->layouts);
  layout = pango_layout_new (shaper->context);
  set_up (layout, text, style);
  g_hash_table_insert (shaper->layouts, g_steal_pointer (&key), layout);
  return layout;
}

void
ut_text_extent (const char *text, const UtTextStyle *style, double *width, double *height)
{
  double own_height;

  extent_of (layout_of (text, style), width, height != NULL ? height : &own_height);
}

/* Sets the text off from what lies under it: by an outline, or, cheaper, by a plate. */
static void
set_off (cairo_t *cr, PangoLayout *layout, const UtTextStyle *style, double x, double y, double width, double height, const UtColour *halo)
{
  cairo_set_source_rgba (cr, halo->red, halo->green, halo->blue, style->plate ? 0.8 : 1);
  if (style->plate)
    {
      cairo_rectangle (cr, x - 1, y, width + 2, height);
      cairo_fill (cr);
      return;
    }
  cairo_move_to (cr, x, y);
  pango_cairo_layout_path (cr, layout);
  cairo_set_dash (cr, NULL, 0, 0);
  cairo_set_line_join (cr, CAIRO_LINE_JOIN_ROUND);
  cairo_set_line_width (cr, style->size * 0.3);
  cairo_stroke (cr);
}

double
ut_text_place (cairo_t *cr, const char *text, const UtTextStyle *style, double x, double y, const UtColour *ink, const UtColour *halo)
{
  PangoLayout *layout = layout_of (text, style);
  double width, height;

  extent_of (layout, &width, &height);
  cairo_save (cr);
  if (halo != NULL)
    set_off (cr, layout, style, x, y, width, height, halo);
  cairo_move_to (cr, x, y);
  cairo_set_source_rgb (cr, ink->red, ink->green, ink->blue);
  pango_cairo_show_layout (cr, layout);
  cairo_restore (cr);
  cairo_new_path (cr);
  return height;
}

void
ut_text_draw (cairo_t *cr, const char *text, double x, double y, double size, const UtColour *ink, const UtColour *halo)
{
  ut_text_place (cr, text, &(UtTextStyle){ .size = size, .plate = TRUE }, x, y, ink, halo);
}

double
ut_text_width (const char *text, double size)
{
  double width;

  ut_text_extent (text, &(UtTextStyle){ .size = size }, &width, NULL);
  return width;
}
