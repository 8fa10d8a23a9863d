#include "document.h"

#include "history.h"
#include "plan-read.h"
#include "plan-write.h"

struct _UtDocument
{
  GObject parent_instance;
  UtHistory *history;
  GFile *file; /* NULL: never saved */
  char *etag;  /* of the file as we read or wrote it */
};

G_DEFINE_FINAL_TYPE (UtDocument, ut_document, G_TYPE_OBJECT)

enum
{
  PROPERTY_FILE = 1,
  PROPERTY_MODIFIED,
  PROPERTY_UNDO_LABEL,
  PROPERTY_REDO_LABEL,
  N_PROPERTIES
};

static GParamSpec *properties[N_PROPERTIES];

enum
{
  SIGNAL_CHANGED,
  N_SIGNALS
};

static guint signals[N_SIGNALS];

static void
ut_document_get_property (GObject *object, guint id, GValue *value, GParamSpec *spec)
{
  UtDocument *self = UT_DOCUMENT (object);
  switch (id)
    {
    case PROPERTY_FILE:
      g_value_set_object (value, self->file);
      break;
    case PROPERTY_MODIFIED:
      g_value_set_boolean (value, ut_document_is_modified (self));
      break;
    case PROPERTY_UNDO_LABEL:
      g_value_set_string (value, ut_document_undo_label (self));
      break;
    case PROPERTY_REDO_LABEL:
      g_value_set_string (value, ut_document_redo_label (self));
      break;
    default:
      G_OBJECT_WARN_INVALID_PROPERTY_ID (object, id, spec);
    }
}

static void
ut_document_finalize (GObject *object)
{
  UtDocument *self = UT_DOCUMENT (object);
  g_clear_pointer (&self->history, ut_history_free);
  g_clear_object (&self->file);
  g_free (self->etag);
  G_OBJECT_CLASS (ut_document_parent_class)->finalize (object);
}

static void
ut_document_class_init (UtDocumentClass *class)
{
  GObjectClass *object_class = G_OBJECT_CLASS (class);
  const GParamFlags flags = G_PARAM_READABLE | G_PARAM_STATIC_STRINGS | G_PARAM_EXPLICIT_NOTIFY;

  object_class->get_property = ut_document_get_property;
  object_class->finalize = ut_document_finalize;
  properties[PROPERTY_FILE] = g_param_spec_object ("file", NULL, NULL, G_TYPE_FILE, flags);
  properties[PROPERTY_MODIFIED] = g_param_spec_boolean ("modified", NULL, NULL, FALSE, flags);
  properties[PROPERTY_UNDO_LABEL] = g_param_spec_string ("undo-label", NULL, NULL, NULL, flags);
  properties[PROPERTY_REDO_LABEL] = g_param_spec_string ("redo-label", NULL, NULL, NULL, flags);
  g_object_class_install_properties (object_class, N_PROPERTIES, properties);
  signals[SIGNAL_CHANGED] = g_signal_new ("changed",
                                          UT_TYPE_DOCUMENT,
                                          G_SIGNAL_RUN_LAST,
                                          0,
                                          NULL,
                                          NULL,
                                          NULL,
                                          G_TYPE_NONE,
                                          2,
                                          G_TYPE_POINTER,
                                          G_TYPE_POINTER);
}

static void
ut_document_init (UtDocument *self)
{
  (void)self;
}

/* What may be told about a document, to find out what a step changed. */
typedef struct
{
  const UtPlan *plan;
  gboolean modified;
  char *undo_label, *redo_label;
} State;

static State
state_take (UtDocument *self)
{
  return (State){
    .plan = ut_plan_ref (ut_document_plan (self)),
    .modified = ut_document_is_modified (self),
    .undo_label = g_strdup (ut_document_undo_label (self)),
    .redo_label = g_strdup (ut_document_redo_label (self)),
  };
}

/* Tells what is different from `before`, and frees it.  The plan first: who hears of a label may
 * look at the plan. */
static void
state_tell (UtDocument *self, State *before)
{
  g_autoptr (UtDocument) keep = g_object_ref (self);
  const UtPlan *plan = ut_plan_ref (ut_document_plan (self));
  if (plan != before->plan)
    g_signal_emit (keep, signals[SIGNAL_CHANGED], 0, before->plan, plan);
  if (ut_document_is_modified (keep) != before->modified)
    g_object_notify_by_pspec (G_OBJECT (keep), properties[PROPERTY_MODIFIED]);
  if (g_strcmp0 (ut_document_undo_label (keep), before->undo_label) != 0)
    g_object_notify_by_pspec (G_OBJECT (keep), properties[PROPERTY_UNDO_LABEL]);
  if (g_strcmp0 (ut_document_redo_label (keep), before->redo_label) != 0)
    g_object_notify_by_pspec (G_OBJECT (keep), properties[PROPERTY_REDO_LABEL]);
  ut_plan_unref (plan);
  ut_plan_unref (before->plan);
  g_free (before->undo_label);
  g_free (before->redo_label);
}

UtDocument *
ut_document_new (const UtPlan *plan)
{
  UtDocument *self = g_object_new (UT_TYPE_DOCUMENT, NULL);
  self->history = ut_history_new (plan);
  return self;
}

UtDocument *
ut_document_open (GFile *file, GPtrArray *faults, GError **error)
{
  g_autofree char *text = NULL, *etag = NULL;
  gsize length;
  if (!g_file_load_contents (file, NULL, &text, &length, &etag, error))
    return NULL;
  g_autoptr (UtPlan) plan = (UtPlan *)ut_plan_read (text, length, faults);
  if (plan == NULL)
    return NULL;
  UtDocument *self = ut_document_new (plan);
  self->file = g_object_ref (file);
  self->etag = g_steal_pointer (&etag);
  return self;
}

const UtPlan *
ut_document_plan (UtDocument *document)
{
  return ut_history_plan (document->history);
}

GFile *
ut_document_file (UtDocument *document)
{
  return document->file;
}

gboolean
ut_document_is_modified (UtDocument *document)
{
  return !ut_history_is_saved (document->history);
}

const char *
ut_document_undo_label (UtDocument *document)
{
  return ut_history_undo_label (document->history);
}

const char *
ut_document_redo_label (UtDocument *document)
{
  return ut_history_redo_label (document->history);
}

const char *
ut_document_selection (UtDocument *document)
{
  return ut_history_selection (document->history);
}

void
ut_document_apply (UtDocument *document,
                   const UtPlan *plan,
                   const char *label,
                   const char *coalesce,
                   const char *selection)
{
  State before = state_take (document);
  ut_history_push (document->history, plan, label, coalesce, selection, g_get_monotonic_time ());
  ut_plan_unref (plan);
  state_tell (document, &before);
}

gboolean
ut_document_undo (UtDocument *document)
{
  State before = state_take (document);
  gboolean undone = ut_history_undo (document->history);
  state_tell (document, &before);
  return undone;
}

gboolean
ut_document_redo (UtDocument *document)
{
  State before = state_take (document);
  gboolean redone = ut_history_redo (document->history);
  state_tell (document, &before);
  return redone;
}

gboolean
ut_document_save (UtDocument *document, GFile *file, gboolean force, GError **error)
{
  GFile *target = file != NULL ? file : document->file;
  g_return_val_if_fail (target != NULL, FALSE);

  gboolean same = document->file != NULL && g_file_equal (target, document->file);
  g_autofree char *etag = NULL;
  if (!ut_plan_write_file (ut_document_plan (document),
                           target,
                           same && !force ? document->etag : NULL,
                           &etag,
                           error))
    return FALSE;

  State before = state_take (document);
  g_free (document->etag);
  document->etag = g_steal_pointer (&etag);
  ut_history_mark_saved (document->history);
  if (!same)
    {
      g_set_object (&document->file, target);
      g_object_notify_by_pspec (G_OBJECT (document), properties[PROPERTY_FILE]);
    }
  state_tell (document, &before);
  return TRUE;
}

UtFileState
ut_document_file_state (UtDocument *document)
{
  if (document->file == NULL)
    return UT_FILE_NONE;
  g_autoptr (GFileInfo) info = g_file_query_info (document->file,
                                                  G_FILE_ATTRIBUTE_ETAG_VALUE
                                                  "," G_FILE_ATTRIBUTE_ACCESS_CAN_WRITE,
                                                  G_FILE_QUERY_INFO_NONE,
                                                  NULL,
                                                  NULL);
  if (info == NULL)
    return UT_FILE_MISSING;
  if (document->etag != NULL && g_strcmp0 (g_file_info_get_etag (info), document->etag) != 0)
    return UT_FILE_CHANGED;
  return g_file_info_get_attribute_boolean (info, G_FILE_ATTRIBUTE_ACCESS_CAN_WRITE)
             ? UT_FILE_SAME
             : UT_FILE_READ_ONLY;
}

gboolean
ut_document_reload (UtDocument *document,
                    const char *label,
                    GPtrArray *faults,
                    GError **error)
{
  g_autofree char *text = NULL, *etag = NULL;
  gsize length;
  if (!g_file_load_contents (document->file, NULL, &text, &length, &etag, error))
    return FALSE;
  const UtPlan *plan = ut_plan_read (text, length, faults);
  if (plan == NULL)
    return FALSE;
  State before = state_take (document);
  ut_history_push (document->history, plan, label, NULL, "", g_get_monotonic_time ());
  ut_history_mark_saved (document->history);
  ut_plan_unref (plan);
  g_free (document->etag);
  document->etag = g_steal_pointer (&etag);
  state_tell (document, &before);
  return TRUE;
}
