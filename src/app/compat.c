#include "compat.h"

#include <glib/gi18n.h>

static gboolean contrast_asked;

/* High contrast comes as the theme's name, from the desktop or from the menu. */
static gboolean
is_contrast (void)
{
  g_autofree char *theme = NULL;

  g_object_get (gtk_settings_get_default (), "gtk-theme-name", &theme, NULL);
  return contrast_asked || (theme != NULL && g_str_has_prefix (theme, "HighContrast"));
}

static gboolean
is_dark (void)
{
  gboolean dark;

  g_object_get (gtk_settings_get_default (), "gtk-application-prefer-dark-theme", &dark, NULL);
  return dark;
}

void
ut_compat_set_style (UtStyle style, gboolean on)
{
  if (style == UT_STYLE_DARK)
    {
      g_object_set (gtk_settings_get_default (), "gtk-application-prefer-dark-theme", on, NULL);
      return;
    }
  contrast_asked = on;
  if (on)
    g_object_set (gtk_settings_get_default (), "gtk-theme-name", "Default-hc", NULL);
  else
    gtk_settings_reset_property (gtk_settings_get_default (), "gtk-theme-name");
}

const UtPalette *
ut_compat_palette (void)
{
  if (is_contrast ())
    return &ut_palette_contrast;
  return is_dark () ? &ut_palette_dark : &ut_palette_light;
}

typedef struct
{
  UtFileChosen chosen;
  gpointer data;
  char *suffix; /* added to a name without one; NULL: none */
} Choice;

static GFile *
with_suffix (GFile *file, const char *suffix)
{
  g_autofree char *name = g_file_get_basename (file);

  if (suffix == NULL || strchr (name, '.') != NULL)
    return g_object_ref (file);
  g_autofree char *longer = g_strconcat (name, suffix, NULL);
  g_autoptr (GFile) parent = g_file_get_parent (file);
  return g_file_get_child (parent, longer);
}

static void
chosen_cb (GtkNativeDialog *dialog, int response, Choice *choice)
{
  if (response == GTK_RESPONSE_ACCEPT)
    {
      g_autoptr (GFile) file = gtk_file_chooser_get_file (GTK_FILE_CHOOSER (dialog));
      g_autoptr (GFile) named = file != NULL ? with_suffix (file, choice->suffix) : NULL;

      if (named != NULL)
        choice->chosen (named, choice->data);
    }
  g_free (choice->suffix);
  g_free (choice);
  g_object_unref (dialog);
}

void
ut_compat_choose_file (GtkWindow *parent, gboolean save, const char *title, const char *name, const char *suffix, UtFileChosen chosen, gpointer data)
{
  GtkFileChooserNative *dialog = gtk_file_chooser_native_new (title,
                                                              parent,
                                                              save ? GTK_FILE_CHOOSER_ACTION_SAVE : GTK_FILE_CHOOSER_ACTION_OPEN,
                                                              NULL,
                                                              NULL);
  Choice *choice = g_new0 (Choice, 1);

  choice->chosen = chosen;
  choice->data = data;
  choice->suffix = save ? g_strdup (suffix) : NULL;
  if (save && name != NULL)
    gtk_file_chooser_set_current_name (GTK_FILE_CHOOSER (dialog), name);
  if (!save)
    {
      g_autoptr (GtkFileFilter) plans = gtk_file_filter_new (), all = gtk_file_filter_new ();
      g_autofree char *pattern = g_strconcat ("*", suffix, NULL);

      gtk_file_filter_set_name (plans, _ ("Plans"));
      gtk_file_filter_add_pattern (plans, pattern);
      gtk_file_filter_set_name (all, _ ("All files"));
      gtk_file_filter_add_pattern (all, "*");
      gtk_file_chooser_add_filter (GTK_FILE_CHOOSER (dialog), plans);
      gtk_file_chooser_add_filter (GTK_FILE_CHOOSER (dialog), all);
    }
  g_signal_connect (dialog, "response", G_CALLBACK (chosen_cb), choice);
  gtk_native_dialog_show (GTK_NATIVE_DIALOG (dialog)); /* the reference is given back in chosen_cb */
}

void
ut_compat_choose_picture (GtkWindow *parent, const char *title, const char *kind, const char *const *types, UtFileChosen chosen, gpointer data)
{
  GtkFileChooserNative *dialog = gtk_file_chooser_native_new (title, parent, GTK_FILE_CHOOSER_ACTION_OPEN, NULL, NULL);
  g_autoptr (GtkFileFilter) filter = gtk_file_filter_new ();
  Choice *choice = g_new0 (Choice, 1);

  choice->chosen = chosen;
  choice->data = data;
  gtk_file_filter_set_name (filter, kind);
  for (guint i = 0; types[i] != NULL; i++)
    gtk_file_filter_add_mime_type (filter, types[i]);
  gtk_file_chooser_add_filter (GTK_FILE_CHOOSER (dialog), filter);
  g_signal_connect (dialog, "response", G_CALLBACK (chosen_cb), choice);
  gtk_native_dialog_show (GTK_NATIVE_DIALOG (dialog)); /* the reference is given back in chosen_cb */
}

static GtkWidget *
message_new (GtkWindow *parent, GtkMessageType type, GtkButtonsType buttons, const char *heading, const char *text)
{
  GtkWidget *dialog = gtk_message_dialog_new (parent, GTK_DIALOG_MODAL | GTK_DIALOG_DESTROY_WITH_PARENT, type, buttons, "%s", heading);

  gtk_message_dialog_format_secondary_text (GTK_MESSAGE_DIALOG (dialog), "%s", text);
  return dialog;
}

void
ut_compat_tell (GtkWindow *parent, const char *heading, const char *text)
{
  GtkWidget *dialog = message_new (parent, GTK_MESSAGE_ERROR, GTK_BUTTONS_CLOSE, heading, text);

  g_signal_connect (dialog, "response", G_CALLBACK (gtk_window_destroy), NULL);
  gtk_window_present (GTK_WINDOW (dialog));
}

typedef struct
{
  UtAnswered answered;
  gpointer data;
} Question;

static void
answered_cb (GtkDialog *dialog, int response, Question *question)
{
  UtAnswered answered = question->answered;
  gpointer data = question->data;

  g_free (question);
  gtk_window_destroy (GTK_WINDOW (dialog));
  answered (response == GTK_RESPONSE_ACCEPT ? UT_ANSWER_SAVE : response == GTK_RESPONSE_REJECT ? UT_ANSWER_DISCARD : UT_ANSWER_CANCEL, data);
}

void
ut_compat_ask_save (GtkWindow *parent, const char *name, UtAnswered answered, gpointer data)
{
  g_autofree char *heading = g_strdup_printf (_ ("Save the changes to “%s”?"), name);
  GtkWidget *dialog = message_new (parent, GTK_MESSAGE_QUESTION, GTK_BUTTONS_NONE, heading, _ ("Changes that are not saved are lost for good."));
  Question *question = g_new (Question, 1);

  question->answered = answered;
  question->data = data;
  gtk_dialog_add_buttons (GTK_DIALOG (dialog),
                          _ ("_Cancel"),
                          GTK_RESPONSE_CANCEL,
                          _ ("_Discard"),
                          GTK_RESPONSE_REJECT,
                          _ ("_Save"),
                          GTK_RESPONSE_ACCEPT,
                          NULL);
  gtk_widget_add_css_class (gtk_dialog_get_widget_for_response (GTK_DIALOG (dialog), GTK_RESPONSE_REJECT), "destructive-action");
  gtk_dialog_set_default_response (GTK_DIALOG (dialog), GTK_RESPONSE_ACCEPT);
  g_signal_connect (dialog, "response", G_CALLBACK (answered_cb), question);
  gtk_window_present (GTK_WINDOW (dialog));
}
