#include "page.h"

#include <math.h>
#include <string.h>

#include "page-layout.h"
#include "plan-write.h"
#include "report.h"
#include "words.h"

#define MARGIN_MM 10.0
#define TITLE_MM 15.0
#define VERDICT_MM 12.0
#define KEY_MM 18.0
#define NOTES_MM 27.0
#define GAP_MM 2.5

static const UtColour black = { 0, 0, 0 };

static const struct
{
  const char *word;
  double width_mm, height_mm; /* upright; A4 and A3 by ISO 216, the others 8.5 x 11 and 11 x 17 inches */
} papers[] = {
  [UT_PAPER_A4] = { "a4", 210, 297 },
  [UT_PAPER_A3] = { "a3", 297, 420 },
  [UT_PAPER_LETTER] = { "letter", 215.9, 279.4 },
  [UT_PAPER_TABLOID] = { "tabloid", 279.4, 431.8 },
};

void
ut_page_size_mm (const UtPageSetup *setup, double *width_mm, double *height_mm)
{
  gboolean upright = setup->orientation == UT_PORTRAIT;

  *width_mm = upright ? papers[setup->paper].width_mm : papers[setup->paper].height_mm;
  *height_mm = upright ? papers[setup->paper].height_mm : papers[setup->paper].width_mm;
}

gboolean
ut_paper_from_word (const char *word, UtPaper *paper)
{
  for (gsize i = 0; i < G_N_ELEMENTS (papers); i++)
    if (strcmp (papers[i].word, word) == 0)
      {
        *paper = (UtPaper) i;
        return TRUE;
      }
  return FALSE;
}

gboolean
ut_orientation_from_word (const char *word, UtOrientation *orientation)
{
  if (strcmp (word, "portrait") == 0)
    *orientation = UT_PORTRAIT;
  else if (strcmp (word, "landscape") == 0)
    *orientation = UT_LANDSCAPE;
  else
    return FALSE;
  return TRUE;
}

/* Title and verdict across the top, notes across the bottom; between them drawing and tables, side by side on a wide sheet. */
void
ut_page_layout (const UtPlan *plan, const UtPageSetup *setup, UtPageLayout *layout)
{
  double width, height, x = MARGIN_MM, top, bottom, inner;

  ut_page_size_mm (setup, &width, &height);
  inner = width - 2 * MARGIN_MM;
  layout->title = (UtBox){ x, MARGIN_MM, inner, TITLE_MM };
  layout->verdict = (UtBox){ x, MARGIN_MM + TITLE_MM, inner, VERDICT_MM };
  layout->notes = (UtBox){ x, height - MARGIN_MM - NOTES_MM, inner, NOTES_MM };
  top = layout->verdict.y + VERDICT_MM + GAP_MM;
  bottom = layout->notes.y - GAP_MM;
  if (setup->orientation == UT_LANDSCAPE)
    {
      double left = inner * 0.63;

      layout->drawing = (UtBox){ x, top, left, bottom - top - KEY_MM - GAP_MM };
      layout->key = (UtBox){ x, bottom - KEY_MM, left, KEY_MM };
      layout->tables = (UtBox){ x + left + 4, top, inner - left - 4, bottom - top };
    }
  else
    {
      /* The tables take what they need, the drawing the rest, within reason. */
      double need = ut_page_table_height (MAX (2 * plan->cells->len, plan->terminals->len)) + 2 * GAP_MM;
      double drawing = CLAMP (bottom - top - need, (bottom - top) * 0.45, (bottom - top) * 0.75);

      layout->drawing = (UtBox){ x, top, inner, drawing - KEY_MM - GAP_MM };
      layout->key = (UtBox){ x, top + drawing - KEY_MM, inner, KEY_MM };
      layout->tables = (UtBox){ x, top + drawing + GAP_MM, inner, bottom - top - drawing - GAP_MM };
    }
}

static void
draw_labelled (cairo_t *cr, double x, double y, double width, const char *label, const char *text)
{
  g_autofree char *whole = g_strdup_printf ("%s  %s", label, text != NULL && text[0] != '\0' ? text : "–");

  ut_text_place (cr, whole, &(UtTextStyle){ .size = 2.4, .width = width }, x, y, &black, NULL);
}

static void
draw_title (cairo_t *cr, const UtStudy *study, const UtPageSetup *setup, const UtBox *box)
{
  const UtPlan *plan = study->gains->plan;
  g_autofree char *fingerprint = ut_plan_fingerprint (plan);
  double half = box->width * 0.5, column = box->width * 0.25;

  ut_text_place (cr,
                 plan->title[0] != '\0' ? plan->title : "Untitled plan",
                 &(UtTextStyle){ .size = 5.2, .bold = TRUE, .width = half - 4 },
                 box->x,
                 box->y,
                 &black,
                 NULL);
  draw_labelled (cr, box->x, box->y + 8.4, half - 4, "Client", plan->client);
  draw_labelled (cr, box->x + half, box->y + 0.4, column - 2, "Prepared by", plan->prepared_by);
  draw_labelled (cr, box->x + half, box->y + 4.4, column - 2, "Revision", plan->revision);
  draw_labelled (cr, box->x + half, box->y + 8.4, column - 2, "Date", plan->date);
  draw_labelled (cr, box->x + half + column, box->y + 0.4, column, "File", setup->file_name);
  draw_labelled (cr, box->x + half + column, box->y + 4.4, column, "Fingerprint", fingerprint);
  ut_text_place (cr, "Undertone", &(UtTextStyle){ .size = 2.4, .width = column }, box->x + half + column, box->y + 8.4, &black, NULL);
  cairo_set_source_rgb (cr, 0, 0, 0);
  cairo_set_line_width (cr, 0.4);
  cairo_move_to (cr, box->x, box->y + box->height - 2.2);
  cairo_line_to (cr, box->x + box->width, box->y + box->height - 2.2);
  cairo_stroke (cr);
}

static void
draw_verdict (cairo_t *cr, const UtStudy *study, const UtBox *box)
{
  g_autofree char *sentence = ut_report_verdict_sentence (study);
  g_autofree char *headroom = ut_page_figure (study->headroom_db, 2), *radius = ut_page_figure (study->spectral_radius, 3);
  g_autofree char *hold = ut_page_figure (study->question.hold_db, 1);
  g_autofree char *figures = g_strdup_printf ("Verdict: %s. SINR headroom %s dB, spectral radius %s. Shown: %slink, %s%s%s%s%s.",
                                              ut_verdict_word (study->verdict),
                                              headroom,
                                              radius,
                                              ut_direction_word (study->question.direction),
                                              ut_aim_word (study->question.aim),
                                              study->question.hold_db > 0 ? ", dB in hand: " : "",
                                              study->question.hold_db > 0 ? hold : "",
                                              study->fallback != UT_FALLBACK_NONE ? "; as that has no answer, " : "",
                                              study->fallback != UT_FALLBACK_NONE ? ut_fallback_word (study->fallback) : "");

  ut_text_place (cr, sentence, &(UtTextStyle){ .size = 3.3, .bold = TRUE, .width = box->width }, box->x, box->y, &black, NULL);
  ut_text_place (cr, figures, &(UtTextStyle){ .size = 2.5, .width = box->width }, box->x, box->y + 5.6, &black, NULL);
}

static char *
assumptions (const UtStudy *study)
{
  const UtPlan *plan = study->gains->plan;
  const UtCarrier *carrier = plan->carrier;
  const UtPropagation *propagation = plan->propagation;
  g_autofree char *law = ut_study_law_text (study);
  g_autofree char *model_error = propagation->shadowing_db > 0
                                   ? g_strdup_printf ("Each gain is a median; single links scatter about it by some ±%g dB; %% is the part of such places that keeps its target, to first order.",
                                                     propagation->shadowing_db)
                                   : g_strdup ("Each gain is a median; single links scatter about it.");
  g_autofree char *eirp = isnan (carrier->eirp_limit_dbm) ? g_strdup ("none entered") : g_strdup_printf ("%g dBm", carrier->eirp_limit_dbm);

  return g_strdup_printf ("%g MHz, noise bandwidth %g MHz, %g K. Sharing: %s, %d channel(s). Design margin %g dB. EIRP limit: %s. "
                          "Base loss: %s. Walls, floors and doors as drawn: %s (layered ones by ITU-R P.2040-3, %s). "
                          "Measured gains: %u. %s Powers are over all ports. Cells that share a channel in time division keep common frame timing.",
                          carrier->frequency_mhz,
                          carrier->bandwidth_mhz,
                          carrier->noise_temperature_k,
                          carrier->sharing == UT_SHARING_SIMULTANEOUS ? "simultaneous" : "orthogonal",
                          carrier->channels,
                          carrier->margin_db,
                          eirp,
                          law,
                          propagation->walls ? "counted along the straight ray" : "not counted",
                          propagation->slab == UT_SLAB_AVERAGED ? "averaged over thickness" : "at the nominal thickness",
                          plan->measured_gains->len,
                          model_error);
}

static const char cautions[] =
  "These are planning figures, estimates from stated assumptions: measure on site before relying on them. Transmit power, EIRP, use of "
  "spectrum and exposure of people are set by local rules and licences; those, and licensed practice, come before this sheet. Keep people "
  "outside the compliance distance of every antenna. Work at height and on mains only by qualified people.";

void
ut_page_draw_notes (cairo_t *cr, const UtStudy *study, const UtBox *box)
{
  g_autofree char *text = assumptions (study);
  double half = box->width / 2 - 2;
  UtTextStyle head = { .size = 2.6, .bold = TRUE }, body = { .size = 2.3, .width = half, .wrap = TRUE };

  cairo_set_source_rgb (cr, 0, 0, 0);
  cairo_set_line_width (cr, 0.4);
  cairo_move_to (cr, box->x, box->y);
  cairo_line_to (cr, box->x + box->width, box->y);
  cairo_stroke (cr);
  cairo_save (cr);
  cairo_rectangle (cr, box->x, box->y, box->width, box->height);
  cairo_clip (cr);
  ut_text_place (cr, "Assumptions", &head, box->x, box->y + 1, &black, NULL);
  ut_text_place (cr, text, &body, box->x, box->y + 4.8, &black, NULL);
  ut_text_place (cr, "Cautions", &head, box->x + half + 4, box->y + 1, &black, NULL);
  ut_text_place (cr, cautions, &body, box->x + half + 4, box->y + 4.8, &black, NULL);
  ut_text_place (cr, "Signed", &(UtTextStyle){ .size = 2.3 }, box->x + half + 4, box->y + box->height - 4, &black, NULL);
  cairo_set_line_width (cr, 0.2);
  cairo_move_to (cr, box->x + half + 15, box->y + box->height - 1);
  cairo_line_to (cr, box->x + box->width, box->y + box->height - 1);
  cairo_stroke (cr);
  cairo_restore (cr);
}

void
ut_compose_page (cairo_t *cr, const UtStudy *study, const UtPageSetup *setup)
{
  UtPageLayout layout;
  UtCommissioning commissioning;

  ut_commissioning_make (study, &commissioning);
  ut_page_layout (study->gains->plan, setup, &layout);
  draw_title (cr, study, setup, &layout.title);
  draw_verdict (cr, study, &layout.verdict);
  ut_page_draw_drawings (cr, study, setup);
  ut_page_draw_key (cr, study->gains->plan, &layout.key, ut_page_drawings (study->gains->plan, setup, NULL));
  ut_page_draw_tables (cr, &commissioning, setup, &layout.tables);
  ut_commissioning_clear (&commissioning);
  ut_page_draw_notes (cr, study, &layout.notes);
}
