/* undertone-cli: the program without its window. */
#include <locale.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "verbs.h"
#include "words.h"

/* Options a verb takes besides --help and --version. */
typedef enum
{
  TAKES_FORMAT = 1 << 0,
  TAKES_CSV = 1 << 1,
  TAKES_QUESTION = 1 << 2,
  TAKES_PAGE = 1 << 3,
} Takes;

typedef struct
{
  const char *name;
  const char *arguments;
  guint n_arguments;
  Takes takes;
  UtExit (*run) (const UtOrder *order);
  const char *what;
} Verb;

static const Verb verbs[] = {
  { "check", "PLAN", 1, 0, ut_verb_check, "read and validate a plan" },
  { "gains", "PLAN", 1, TAKES_FORMAT | TAKES_CSV, ut_verb_gains, "the gain matrix in dB, a row a terminal, a column a cell" },
  { "path", "PLAN CELL TERMINAL", 3, TAKES_FORMAT, ut_verb_path, "how one gain comes about" },
  { "solve", "PLAN", 1, TAKES_FORMAT | TAKES_CSV | TAKES_QUESTION, ut_verb_solve, "verdict, headroom, powers and links" },
  { "page", "PLAN --output FILE", 1, TAKES_QUESTION | TAKES_PAGE, ut_verb_page, "the one page as .pdf, .svg or .png" },
};

static const char options_help[] =
  "Options\n"
  "  --format text|json|csv      how to print (gains, solve; path: text or json)\n"
  "  --direction down|up         which end transmits (solve, page; default down)\n"
  "  --aim least-power|equal-margin|fewest-dropped|as-set\n"
  "                              how powers are chosen (solve, page; default least-power)\n"
  "  --hold DB                   dB kept in hand on every target when powers are chosen (solve, page; default 0)\n"
  "  --output FILE               where the page goes\n"
  "  --paper a4|a3|letter|tabloid, --orientation portrait|landscape\n"
  "                              the sheet (page; default a4, landscape)\n"
  "  --help, --version\n"
  "\n"
  "PLAN may be -, standard input.\n"
  "Exit status: 0 done; 1 solve: not all is met; 2 wrong use; 3 the plan cannot be read or is not valid;\n"
  "4 an output cannot be written.\n";

static void
print_help (void)
{
  printf ("Usage: undertone-cli VERB PLAN [OPTION...]\n\n"
          "Decides whether every terminal of a small network that shares spectrum reaches its SINR target, and with\n"
          "which least powers.\n\nVerbs\n");
  for (gsize i = 0; i < G_N_ELEMENTS (verbs); i++)
    {
      g_autofree char *usage = g_strconcat (verbs[i].name, " ", verbs[i].arguments, NULL);
      printf ("  %-26s  %s\n", usage, verbs[i].what);
    }
  printf ("\n%s", options_help);
}

/* Texts of the options as given; NULL where not. */
typedef struct
{
  char *format, *direction, *aim, *hold, *output, *paper, *orientation;
} Texts;

static gboolean
wrong (const char *option, const char *text, const char *expected)
{
  ut_complain ("--%s %s: not understood; expected %s", option, text, expected);
  return FALSE;
}

static gboolean
not_taken (const Verb *verb, const char *option, const char *text)
{
  if (text == NULL)
    return FALSE;
  ut_complain ("%s does not take --%s; see undertone-cli --help", verb->name, option);
  return TRUE;
}

static gboolean
read_hold (const char *text, double *hold_db)
{
  char *end;
  double value = g_ascii_strtod (text, &end);

  if (end == text || *end != '\0' || !isfinite (value) || value < 0 || value > 400)
    return FALSE;
  *hold_db = value;
  return TRUE;
}

static gboolean
read_format (const Verb *verb, const char *text, UtFormat *format)
{
  if (strcmp (text, "text") == 0)
    *format = UT_FORMAT_TEXT;
  else if (strcmp (text, "json") == 0)
    *format = UT_FORMAT_JSON;
  else if (strcmp (text, "csv") == 0 && (verb->takes & TAKES_CSV))
    *format = UT_FORMAT_CSV;
  else
    return FALSE;
  return TRUE;
}

static gboolean
read_question (const Texts *texts, UtQuestion *question)
{
  if (texts->direction != NULL && !ut_direction_from_word (texts->direction, &question->direction))
    return wrong ("direction", texts->direction, "down or up");
  if (texts->aim != NULL && !ut_aim_from_word (texts->aim, &question->aim))
    return wrong ("aim", texts->aim, "least-power, equal-margin, fewest-dropped or as-set");
  if (texts->hold != NULL && !read_hold (texts->hold, &question->hold_db))
    return wrong ("hold", texts->hold, "dB from 0 to 400, with a decimal point");
  return TRUE;
}

static gboolean
read_page (const Texts *texts, UtOrder *order)
{
  order->page.orientation = UT_LANDSCAPE;
  if (texts->paper != NULL && !ut_paper_from_word (texts->paper, &order->page.paper))
    return wrong ("paper", texts->paper, "a4, a3, letter or tabloid");
  if (texts->orientation != NULL && !ut_orientation_from_word (texts->orientation, &order->page.orientation))
    return wrong ("orientation", texts->orientation, "portrait or landscape");
  if (texts->output == NULL)
    {
      ut_complain ("page needs --output FILE, a name ending in .pdf, .svg or .png");
      return FALSE;
    }
  order->output = texts->output;
  return TRUE;
}

/* Checks the options against what the verb takes and fills in the order. */
static gboolean
read_options (const Verb *verb, const Texts *texts, UtOrder *order)
{
  if (!(verb->takes & TAKES_FORMAT) && not_taken (verb, "format", texts->format))
    return FALSE;
  if (!(verb->takes & TAKES_QUESTION)
      && (not_taken (verb, "direction", texts->direction) || not_taken (verb, "aim", texts->aim)
          || not_taken (verb, "hold", texts->hold)))
    return FALSE;
  if (!(verb->takes & TAKES_PAGE)
      && (not_taken (verb, "output", texts->output) || not_taken (verb, "paper", texts->paper)
          || not_taken (verb, "orientation", texts->orientation)))
    return FALSE;
  if (texts->format != NULL && !read_format (verb, texts->format, &order->format))
    return wrong ("format", texts->format, verb->takes & TAKES_CSV ? "text, json or csv" : "text or json");
  return read_question (texts, &order->question) && (!(verb->takes & TAKES_PAGE) || read_page (texts, order));
}

static const Verb *
find_verb (const char *name)
{
  for (gsize i = 0; i < G_N_ELEMENTS (verbs); i++)
    if (strcmp (verbs[i].name, name) == 0)
      return &verbs[i];
  return NULL;
}

static UtExit
run (char **words, const Texts *texts)
{
  const Verb *verb = words[0] != NULL ? find_verb (words[0]) : NULL;
  UtOrder order = { .question = { .reserves = TRUE, .remedies = TRUE } };

  if (words[0] == NULL)
    {
      ut_complain ("no verb given; expected check, gains, path, solve or page, see undertone-cli --help");
      return UT_EXIT_WRONG_USE;
    }
  if (verb == NULL)
    {
      ut_complain ("there is no verb \"%s\"; expected check, gains, path, solve or page", words[0]);
      return UT_EXIT_WRONG_USE;
    }
  order.arguments = words + 1;
  if (g_strv_length (order.arguments) != verb->n_arguments)
    {
      ut_complain ("wrong number of arguments; expected undertone-cli %s %s", verb->name, verb->arguments);
      return UT_EXIT_WRONG_USE;
    }
  if (!read_options (verb, texts, &order))
    return UT_EXIT_WRONG_USE;
  return verb->run (&order);
}

int
main (int argc, char **argv)
{
  Texts texts = { 0 };
  gboolean help = FALSE, version = FALSE;
  g_auto (GStrv) words = NULL;
  g_autoptr (GError) error = NULL;
  const GOptionEntry entries[] = {
    { "help", 'h', 0, G_OPTION_ARG_NONE, &help, NULL, NULL },
    { "version", 0, 0, G_OPTION_ARG_NONE, &version, NULL, NULL },
    { "format", 0, 0, G_OPTION_ARG_STRING, &texts.format, NULL, NULL },
    { "direction", 0, 0, G_OPTION_ARG_STRING, &texts.direction, NULL, NULL },
    { "aim", 0, 0, G_OPTION_ARG_STRING, &texts.aim, NULL, NULL },
    { "hold", 0, 0, G_OPTION_ARG_STRING, &texts.hold, NULL, NULL },
    { "output", 0, 0, G_OPTION_ARG_FILENAME, &texts.output, NULL, NULL },
    { "paper", 0, 0, G_OPTION_ARG_STRING, &texts.paper, NULL, NULL },
    { "orientation", 0, 0, G_OPTION_ARG_STRING, &texts.orientation, NULL, NULL },
    { G_OPTION_REMAINING, 0, 0, G_OPTION_ARG_FILENAME_ARRAY, &words, NULL, NULL },
    { NULL },
  };
  char *no_words[] = { NULL };
  UtExit exit = UT_EXIT_DONE;

  setlocale (LC_ALL, "");
  g_autoptr (GOptionContext) context = g_option_context_new (NULL);
  g_option_context_set_help_enabled (context, FALSE);
  g_option_context_add_main_entries (context, entries, NULL);
  if (!g_option_context_parse (context, &argc, &argv, &error))
    {
      ut_complain ("%s; see undertone-cli --help", error->message);
      exit = UT_EXIT_WRONG_USE;
    }
  else if (help)
    print_help ();
  else if (version)
    printf ("undertone-cli %s\n", UT_VERSION);
  else
    exit = run (words != NULL ? words : no_words, &texts);

  char **given[] = { &texts.format, &texts.direction, &texts.aim, &texts.hold, &texts.output, &texts.paper, &texts.orientation };
  for (gsize i = 0; i < G_N_ELEMENTS (given); i++)
    g_free (*given[i]);
  return (int) exit;
}
