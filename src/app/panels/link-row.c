#include "link-row.h"

#include <math.h>

#include <glib/gi18n.h>

#include "report.h"

struct _UtLinkRow
{
  GObject parent;
  char *texts[UT_N_COLUMNS];
  double figures[UT_N_COLUMNS];
  gboolean failing, limiting;
};

G_DEFINE_FINAL_TYPE (UtLinkRow, ut_link_row, G_TYPE_OBJECT)

enum { CHANGED, N_SIGNALS };
static guint signals[N_SIGNALS];

typedef struct
{
  const char *title;
  int decimals; /* -1: no figure */
} Column;

static const Column columns[] = {
  [UT_COLUMN_TERMINAL] = { N_ ("Terminal"), -1 },  [UT_COLUMN_NAME] = { N_ ("Name"), -1 },
  [UT_COLUMN_CELL] = { N_ ("Cell"), -1 },          [UT_COLUMN_POWER] = { N_ ("Power dBm"), 2 },
  [UT_COLUMN_TARGET] = { N_ ("Target dB"), 1 },    [UT_COLUMN_SINR] = { N_ ("SINR dB"), 2 },
  [UT_COLUMN_MARGIN] = { N_ ("Margin dB"), 2 },    [UT_COLUMN_SIGNAL] = { N_ ("Signal dBm"), 1 },
  [UT_COLUMN_INTERFERENCE] = { N_ ("Interference dBm"), 1 }, [UT_COLUMN_RESERVE] = { N_ ("Reserve dB"), 2 },
  [UT_COLUMN_CHANCE] = { N_ ("Probability %"), 1 }, [UT_COLUMN_LIMIT] = { N_ ("Limit"), -1 },
};

static void
ut_link_row_finalize (GObject *object)
{
  for (guint i = 0; i < UT_N_COLUMNS; i++)
    g_free (UT_LINK_ROW (object)->texts[i]);
  G_OBJECT_CLASS (ut_link_row_parent_class)->finalize (object);
}

static void
ut_link_row_class_init (UtLinkRowClass *class)
{
  G_OBJECT_CLASS (class)->finalize = ut_link_row_finalize;
  signals[CHANGED] = g_signal_new ("changed", UT_TYPE_LINK_ROW, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 0);
}

static void
ut_link_row_init (UtLinkRow *self)
{
  for (guint i = 0; i < UT_N_COLUMNS; i++)
    self->texts[i] = g_strdup ("");
}

UtLinkRow *
ut_link_row_new (UtStudy *study, guint index)
{
  UtLinkRow *row = g_object_new (UT_TYPE_LINK_ROW, NULL);

  ut_link_row_set (row, study, index);
  return row;
}

/* Which limit the link's transmitter stands at. */
static const char *
limit_text (const UtStudy *study, const UtLinkAnswer *link)
{
  for (guint i = 0; i < study->transmitters->len; i++)
    {
      const UtTransmitterAnswer *sender = ut_study_transmitter (study, i);

      if (sender->is_cell ? (int) sender->index != link->cell : sender->index != link->terminal)
        continue;
      if (sender->power_dbm >= sender->power_max_dbm - 1e-6)
        return _ ("at most");
      if (sender->power_dbm <= sender->power_min_dbm + 1e-6)
        return _ ("at least");
    }
  return "";
}

void
ut_link_row_set (UtLinkRow *self, UtStudy *study, guint index)
{
  const UtLinkAnswer *link = ut_study_link (study, index);
  const UtPlan *plan = study->gains->plan;
  const UtRadio *terminal = &ut_plan_terminal (plan, link->terminal)->radio;
  char *texts[UT_N_COLUMNS] = { NULL };
  gboolean changed = FALSE;

  self->figures[UT_COLUMN_POWER] = link->power_dbm;
  self->figures[UT_COLUMN_TARGET] = link->target_db;
  self->figures[UT_COLUMN_SINR] = link->sinr_db;
  self->figures[UT_COLUMN_MARGIN] = link->margin_db;
  self->figures[UT_COLUMN_SIGNAL] = link->signal_dbm;
  self->figures[UT_COLUMN_INTERFERENCE] = link->interference_dbm;
  self->figures[UT_COLUMN_RESERVE] = link->reserve_db;
  self->figures[UT_COLUMN_CHANCE] = 100 * link->chance;
  self->failing = !(link->margin_db >= UT_MARGIN_MET_DB);
  self->limiting = FALSE;
  for (guint i = 0; i < study->limiting_group->len; i++)
    self->limiting = self->limiting || g_array_index (study->limiting_group, guint, i) == link->terminal;
  texts[UT_COLUMN_TERMINAL] = g_strdup (terminal->id);
  texts[UT_COLUMN_NAME] = g_strdup (terminal->name);
  texts[UT_COLUMN_CELL] = g_strdup (link->cell < 0 ? "–" : ut_plan_cell (plan, (guint) link->cell)->radio.id);
  texts[UT_COLUMN_LIMIT] = g_strdup (limit_text (study, link));
  for (guint i = 0; i < UT_N_COLUMNS; i++)
    {
      if (columns[i].decimals >= 0)
        texts[i] = ut_report_figure (self->figures[i], columns[i].decimals);
      changed = changed || !g_str_equal (texts[i], self->texts[i]);
      g_free (self->texts[i]);
      self->texts[i] = texts[i];
    }
  if (changed)
    g_signal_emit (self, signals[CHANGED], 0);
}

const char *
ut_link_row_terminal (UtLinkRow *self)
{
  return self->texts[UT_COLUMN_TERMINAL];
}

const char *
ut_link_row_text (UtLinkRow *self, UtLinkColumn column)
{
  return self->texts[column];
}

double
ut_link_row_figure (UtLinkRow *self, UtLinkColumn column)
{
  return self->figures[column];
}

gboolean
ut_link_row_passes (UtLinkRow *self, UtLinkShow show)
{
  switch (show)
    {
    case UT_SHOW_FAILING:
      return self->failing;
    case UT_SHOW_AT_LIMIT:
      return self->texts[UT_COLUMN_LIMIT][0] != '\0';
    case UT_SHOW_LIMITING:
      return self->limiting;
    case UT_SHOW_ALL:
    case UT_N_SHOWS:
      break;
    }
  return TRUE;
}

const char *
ut_link_column_title (UtLinkColumn column)
{
  return _ (columns[column].title);
}

gboolean
ut_link_column_is_figure (UtLinkColumn column)
{
  return columns[column].decimals >= 0;
}
