#include "text.h"

#include <pango/pangocairo.h>

/* One user unit is one target unit, whatever the screen; context: taken over, NULL for a measurement. */
static PangoLayout *
layout_new (PangoContext *context)
{
  cairo_font_options_t *options = cairo_font_options_create ();
  PangoLayout *layout;

  if (context == NULL)
    context = pango_font_map_create_context (pango_cairo_font_map_get_default ());
  cairo_font_options_set_hint_metrics (options, CAIRO_HINT_METRICS_OFF);
  cairo_font_options_set_hint_style (options, CAIRO_HINT_STYLE_NONE);
  pango_cairo_context_set_font_options (context, options);
  pango_cairo_context_set_resolution (context, 96);
  pango_context_set_round_glyph_positions (context, FALSE);
  cairo_font_options_destroy (options);
  layout = pango_layout_new (context);
  g_object_unref (context);
  return layout;
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

void
ut_text_extent (const char *text, const UtTextStyle *style, double *width, double *height)
{
  g_autoptr (PangoLayout) layout = layout_new (NULL);
  double own_height;

  set_up (layout, text, style);
  extent_of (layout, width, height != NULL ? height : &own_height);
}

double
ut_text_place (cairo_t *cr, const char *text, const UtTextStyle *style, double x, double y, const UtColour *ink, const UtColour *halo)
{
  g_autoptr (PangoLayout) layout = layout_new (pango_cairo_create_context (cr));
  double width, height;

  set_up (layout, text, style);
  extent_of (layout, &width, &height);
  cairo_save (cr);
  cairo_move_to (cr, x, y);
  if (halo != NULL)
    {
      pango_cairo_layout_path (cr, layout);
      cairo_set_dash (cr, NULL, 0, 0);
      cairo_set_line_join (cr, CAIRO_LINE_JOIN_ROUND);
      cairo_set_line_width (cr, style->size * 0.3);
      cairo_set_source_rgb (cr, halo->red, halo->green, halo->blue);
      cairo_stroke (cr);
      cairo_move_to (cr, x, y);
    }
  cairo_set_source_rgb (cr, ink->red, ink->green, ink->blue);
  pango_cairo_show_layout (cr, layout);
  cairo_restore (cr);
  cairo_new_path (cr);
  return height;
}

void
ut_text_draw (cairo_t *cr, const char *text, double x, double y, double size, const UtColour *ink, const UtColour *halo)
{
  ut_text_place (cr, text, &(UtTextStyle){ .size = size }, x, y, ink, halo);
}

double
ut_text_width (const char *text, double size)
{
  double width;

  ut_text_extent (text, &(UtTextStyle){ .size = size }, &width, NULL);
  return width;
}
