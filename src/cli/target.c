/* The verb `target`: between SINR, spectral efficiency and bit rate, occupied bandwidth, level per resource element.  Needs no plan. */
#include "verbs.h"

#include <math.h>

#include "json-text.h"
#include "rate.h"
#include "report.h"

/* What follows from the wish; NAN and 0: not known. */
typedef struct
{
  double bandwidth_mhz;
  guint resource_blocks;
  double bit_s_hz, rate_mbit_s, sinr_db;
  guint cqi;
  double cqi_sinr_db;
  double element_dbm;
} Answer;

static gboolean
find_bandwidth (const UtWish *wish, Answer *answer)
{
  answer->bandwidth_mhz = wish->bandwidth_mhz;
  if (isnan (wish->channel_mhz) && isnan (wish->subcarrier_khz))
    return TRUE;
  if (isnan (wish->channel_mhz) || isnan (wish->subcarrier_khz) || !isnan (wish->bandwidth_mhz))
    {
      ut_complain ("--channel and --subcarrier go together, and without --bandwidth; expected --channel 20 --subcarrier 30, or --bandwidth 18.36");
      return FALSE;
    }
  answer->resource_blocks = ut_resource_blocks (wish->channel_mhz, wish->subcarrier_khz);
  if (answer->resource_blocks == 0)
    {
      ut_complain ("a channel of %g MHz with sub-carriers of %g kHz: there is none; expected a pair of TS 38.101 table 5.3.2-1, such as 20 and 30",
                   wish->channel_mhz,
                   wish->subcarrier_khz);
      return FALSE;
    }
  answer->bandwidth_mhz = ut_occupied_hz (answer->resource_blocks, wish->subcarrier_khz) / 1e6;
  return TRUE;
}

/* Efficiency from whatever was asked for, and the SINR that goes with it. */
static gboolean
find_sinr (const UtWish *wish, const UtShannon *shannon, Answer *answer)
{
  int given = !isnan (wish->bit_s_hz) + !isnan (wish->rate_mbit_s) + !isnan (wish->sinr_db);

  if (given > 1)
    {
      ut_complain ("more than one of --efficiency, --rate and --sinr; expected one");
      return FALSE;
    }
  if (!isnan (wish->rate_mbit_s) && isnan (answer->bandwidth_mhz))
    {
      ut_complain ("--rate needs a bandwidth; expected --bandwidth MHZ, or --channel MHZ and --subcarrier KHZ");
      return FALSE;
    }
  answer->bit_s_hz = !isnan (wish->rate_mbit_s) ? wish->rate_mbit_s / answer->bandwidth_mhz : wish->bit_s_hz;
  answer->sinr_db = wish->sinr_db;
  if (!isnan (wish->sinr_db))
    answer->bit_s_hz = ut_shannon_efficiency (shannon, wish->sinr_db);
  else if (given > 0 && ut_shannon_sinr_db (shannon, answer->bit_s_hz, &answer->sinr_db) != UT_RADIO_OK)
    {
      ut_complain ("%g bit/s/Hz cannot be had; expected above 0 and at most %g", answer->bit_s_hz, shannon->most_bit_s_hz);
      return FALSE;
    }
  answer->rate_mbit_s = answer->bit_s_hz * answer->bandwidth_mhz;
  if (!isnan (answer->bit_s_hz) && answer->bit_s_hz > 0)
    answer->cqi = ut_cqi_for_efficiency (answer->bit_s_hz);
  answer->cqi_sinr_db = answer->cqi > 0 ? ut_cqis[answer->cqi - 1].sinr_db : NAN;
  return TRUE;
}

static gboolean
find_element (const UtWish *wish, Answer *answer)
{
  answer->element_dbm = NAN;
  if (isnan (wish->level_dbm))
    return TRUE;
  if (answer->resource_blocks == 0)
    {
      ut_complain ("--level needs resource blocks to be shared by; expected --channel MHZ and --subcarrier KHZ");
      return FALSE;
    }
  answer->element_dbm = ut_element_dbm (wish->level_dbm, answer->resource_blocks);
  return TRUE;
}

static void
append_row (GString *out, const char *what, double value, int decimals, const char *unit)
{
  g_autofree char *figure = ut_report_figure (value, decimals);

  if (isfinite (value))
    g_string_append_printf (out, "%-24s %s%s%s\n", what, figure, unit[0] != '\0' ? " " : "", unit);
}

static char *
as_text (const Answer *answer, gboolean down)
{
  GString *out = g_string_new (NULL);

  append_row (out, "Occupied bandwidth", answer->bandwidth_mhz, 3, "MHz");
  if (answer->resource_blocks > 0)
    append_row (out, "Resource blocks", answer->resource_blocks, 0, "(TS 38.101-1 table 5.3.2-1)");
  append_row (out, "Spectral efficiency", answer->bit_s_hz, 4, "bit/s/Hz");
  append_row (out, "Bit rate", answer->rate_mbit_s, 3, "Mbit/s");
  append_row (out,
              "SINR target",
              answer->sinr_db,
              2,
              down ? "dB (TR 36.942 annex A: 0.6 of Shannon's bound, at most 4.4 bit/s/Hz)" : "dB (TR 36.942 annex A: 0.4 of Shannon's bound, at most 2 bit/s/Hz)");
  if (answer->cqi > 0)
    {
      append_row (out, "CQI index", answer->cqi, 0, "(TS 38.214 table 5.2.2.1-2)");
      append_row (out, "SINR for that index", answer->cqi_sinr_db, 1, "dB (10 % block errors; common practice)");
    }
  append_row (out, "Level per element", answer->element_dbm, 2, "dBm");
  return g_string_free (out, FALSE);
}

static void
add_figure (JsonBuilder *builder, const char *key, double value)
{
  json_builder_set_member_name (builder, key);
  if (isfinite (value))
    json_builder_add_double_value (builder, value);
  else
    json_builder_add_null_value (builder);
}

static char *
as_json (const Answer *answer)
{
  g_autoptr (JsonBuilder) builder = json_builder_new_immutable ();

  json_builder_begin_object (builder);
  add_figure (builder, "bandwidth_mhz", answer->bandwidth_mhz);
  add_figure (builder, "resource_blocks", answer->resource_blocks > 0 ? answer->resource_blocks : NAN);
  add_figure (builder, "efficiency_bit_s_hz", answer->bit_s_hz);
  add_figure (builder, "rate_mbit_s", answer->rate_mbit_s);
  add_figure (builder, "sinr_db", answer->sinr_db);
  add_figure (builder, "cqi", answer->cqi > 0 ? answer->cqi : NAN);
  add_figure (builder, "cqi_sinr_db", answer->cqi_sinr_db);
  add_figure (builder, "element_dbm", answer->element_dbm);
  json_builder_end_object (builder);
  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  return ut_json_text (root);
}

UtExit
ut_verb_target (const UtOrder *order)
{
  gboolean down = order->question.direction == UT_DIRECTION_DOWN;
  Answer answer = { .bit_s_hz = NAN, .rate_mbit_s = NAN, .sinr_db = NAN, .cqi_sinr_db = NAN };

  if (!find_bandwidth (&order->wish, &answer) || !find_sinr (&order->wish, down ? &ut_shannon_down : &ut_shannon_up, &answer)
      || !find_element (&order->wish, &answer))
    return UT_EXIT_WRONG_USE;
  if (isnan (answer.bandwidth_mhz) && isnan (answer.sinr_db))
    {
      ut_complain ("nothing is asked for; expected --efficiency, --rate, --sinr, --bandwidth, or --channel with --subcarrier");
      return UT_EXIT_WRONG_USE;
    }
  return ut_print_text (order->format == UT_FORMAT_JSON ? as_json (&answer) : as_text (&answer, down));
}
