/* undertone: the desktop program. */
#include <locale.h>

#include <glib/gi18n.h>

#include "application.h"

int
main (int argc, char **argv)
{
  /* Translations of a program that is not installed lie elsewhere. */
  const char *folder = g_getenv ("UNDERTONE_LOCALE_FOLDER");

  setlocale (LC_ALL, "");
  bindtextdomain (UT_GETTEXT_DOMAIN, folder != NULL ? folder : UT_LOCALE_FOLDER);
  bind_textdomain_codeset (UT_GETTEXT_DOMAIN, "UTF-8");
  textdomain (UT_GETTEXT_DOMAIN);

  g_autoptr (UtApplication) application = ut_application_new ();
  return g_application_run (G_APPLICATION (application), argc, argv);
}
