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
  TAKES_DIRECTION = 1 << 2,
  TAKES_AIM = 1 << 3,
  TAKES_OUTPUT = 1 << 4,
  TAKES_PAPER = 1 << 5,
  TAKES_SEED = 1 << 6,
  TAKES_LOOP = 1 << 7,
  TAKES_WISH = 1 << 8,
  TAKES_PORTS = 1 << 9,
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
  { "solve", "PLAN", 1, TAKES_FORMAT | TAKES_CSV | TAKES_DIRECTION | TAKES_AIM, ut_verb_solve, "verdict, headroom, powers, links, remedies" },
  { "channels", "PLAN", 1, TAKES_FORMAT | TAKES_DIRECTION | TAKES_SEED | TAKES_OUTPUT, ut_verb_channels, "the cells' channels with the largest headroom" },
  { "control", "PLAN", 1, TAKES_FORMAT | TAKES_CSV | TAKES_DIRECTION | TAKES_SEED | TAKES_LOOP, ut_verb_control,
    "the radios finding their powers by themselves" },
  { "target", "", 0, TAKES_FORMAT | TAKES_DIRECTION | TAKES_WISH, ut_verb_target, "SINR targets, bit rates and bandwidths (no plan)" },
  { "powers", "PLAN", 1, TAKES_FORMAT | TAKES_CSV | TAKES_DIRECTION | TAKES_AIM | TAKES_PORTS, ut_verb_powers, "the settings to type into each radio" },
  { "page", "PLAN --output FILE", 1, TAKES_DIRECTION | TAKES_AIM | TAKES_OUTPUT | TAKES_PAPER, ut_verb_page, "the one page as .pdf, .svg or .png" },
};

static const char verb_names[] = "check, gains, path, solve, channels, control, target, powers or page";

static const char options_help[] =
  "Options\n"
  "  --format text|json|csv      how to print (csv: gains, solve, control, powers)\n"
  "  --direction down|up         which end transmits (solve, channels, control, powers, page; default down)\n"
  "  --aim least-power|equal-margin|fewest-dropped|as-set\n"
  "                              how powers are chosen (solve, powers, page; default least-power)\n"
  "  --hold DB                   dB kept in hand on every target when powers are chosen (solve, powers, page; default 0)\n"
  "  --output FILE               where the page goes; channels: where the plan with the channels found goes\n"
  "  --paper a4|a3|letter|tabloid, --orientation portrait|landscape\n"
  "                              the sheet (page; default a4, landscape)\n"
  "  --ports N                   powers: antenna ports that share a radio's power (default 1)\n"
  "  --seed N                    of what is random (channels: starts; control: measurement errors; default 1)\n"
  "  --rule exact|steps          control: straight to the power needed, or up and down by a step (default exact)\n"
  "  --step DB                   control: that step (default 1)\n"
  "  --delay N                   control: rounds by which what a radio sees is old (default 0)\n"
  "  --error DB                  control: what a radio measures is off by up to so much (default 0)\n"
  "  --start set|least|most      control: powers to start from (default set)\n"
  "  --rounds N                  control: how many (default 30)\n"
  "  --efficiency BIT_S_HZ | --rate MBIT_S | --sinr DB\n"
  "                              target: what is wanted; the other two follow\n"
  "  --bandwidth MHZ | --channel MHZ --subcarrier KHZ\n"
  "                              target: occupied bandwidth, or the radio channel it follows from\n"
  "  --level DBM                 target: a level over the whole band, told per resource element\n"
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

/* Options and who takes them. */
typedef enum { FORMAT, DIRECTION, AIM, HOLD, OUTPUT, PAPER, ORIENTATION, SEED, RULE, STEP, DELAY, ERROR, START, ROUNDS, EFFICIENCY, RATE, SINR, BANDWIDTH, CHANNEL, SUBCARRIER, LEVEL, PORTS, N_OPTIONS } Option;

static const struct
{
  const char *name;
  Takes taken;
  GOptionArg type;
} options[N_OPTIONS] = {
  [FORMAT] = { "format", TAKES_FORMAT, G_OPTION_ARG_STRING },
  [DIRECTION] = { "direction", TAKES_DIRECTION, G_OPTION_ARG_STRING },
  [AIM] = { "aim", TAKES_AIM, G_OPTION_ARG_STRING },
  [HOLD] = { "hold", TAKES_AIM, G_OPTION_ARG_STRING },
  [OUTPUT] = { "output", TAKES_OUTPUT, G_OPTION_ARG_FILENAME },
  [PAPER] = { "paper", TAKES_PAPER, G_OPTION_ARG_STRING },
  [ORIENTATION] = { "orientation", TAKES_PAPER, G_OPTION_ARG_STRING },
  [SEED] = { "seed", TAKES_SEED, G_OPTION_ARG_STRING },
  [RULE] = { "rule", TAKES_LOOP, G_OPTION_ARG_STRING },
  [STEP] = { "step", TAKES_LOOP, G_OPTION_ARG_STRING },
  [DELAY] = { "delay", TAKES_LOOP, G_OPTION_ARG_STRING },
  [ERROR] = { "error", TAKES_LOOP, G_OPTION_ARG_STRING },
  [START] = { "start", TAKES_LOOP, G_OPTION_ARG_STRING },
  [ROUNDS] = { "rounds", TAKES_LOOP, G_OPTION_ARG_STRING },
  [EFFICIENCY] = { "efficiency", TAKES_WISH, G_OPTION_ARG_STRING },
  [RATE] = { "rate", TAKES_WISH, G_OPTION_ARG_STRING },
  [SINR] = { "sinr", TAKES_WISH, G_OPTION_ARG_STRING },
  [BANDWIDTH] = { "bandwidth", TAKES_WISH, G_OPTION_ARG_STRING },
  [CHANNEL] = { "channel", TAKES_WISH, G_OPTION_ARG_STRING },
  [SUBCARRIER] = { "subcarrier", TAKES_WISH, G_OPTION_ARG_STRING },
  [LEVEL] = { "level", TAKES_WISH, G_OPTION_ARG_STRING },
  [PORTS] = { "ports", TAKES_PORTS, G_OPTION_ARG_STRING },
};

/* Texts of the options as given; NULL where not. */
typedef char *Texts[N_OPTIONS];

static gboolean
wrong (Option option, const char *text, const char *expected)
{
  ut_complain ("--%s %s: not understood; expected %s", options[option].name, text, expected);
  return FALSE;
}

/* A number with a decimal point in [least, most]; what is not given leaves *value alone. */
static gboolean
read_number (char *const *texts, Option option, double least, double most, const char *expected, double *value)
{
  const char *text = texts[option];
  char *end;
  double number;

  if (text == NULL)
    return TRUE;
  number = g_ascii_strtod (text, &end);
  if (end == text || *end != '\0' || !isfinite (number) || number < least || number > most)
    return wrong (option, text, expected);
  *value = number;
  return TRUE;
}

static gboolean
read_whole (char *const *texts, Option option, guint most, const char *expected, guint *value)
{
  guint64 number;

  if (texts[option] == NULL)
    return TRUE;
  if (!g_ascii_string_to_unsigned (texts[option], 10, 0, most, &number, NULL))
    return wrong (option, texts[option], expected);
  *value = (guint) number;
  return TRUE;
}

/* One of a few words; their order is that of the values. */
static gboolean
read_word (char *const *texts, Option option, const char *const *words, const char *expected, guint *value)
{
  if (texts[option] == NULL)
    return TRUE;
  for (guint k = 0; words[k] != NULL; k++)
    if (strcmp (texts[option], words[k]) == 0)
      {
        *value = k;
        return TRUE;
      }
  return wrong (option, texts[option], expected);
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
read_question (char *const *texts, UtQuestion *question)
{
  if (texts[DIRECTION] != NULL && !ut_direction_from_word (texts[DIRECTION], &question->direction))
    return wrong (DIRECTION, texts[DIRECTION], "down or up");
  if (texts[AIM] != NULL && !ut_aim_from_word (texts[AIM], &question->aim))
    return wrong (AIM, texts[AIM], "least-power, equal-margin, fewest-dropped or as-set");
  return read_number (texts, HOLD, 0, 400, "dB from 0 to 400, with a decimal point", &question->hold_db);
}

static gboolean
read_page (char *const *texts, UtOrder *order)
{
  order->page.orientation = UT_LANDSCAPE;
  if (texts[PAPER] != NULL && !ut_paper_from_word (texts[PAPER], &order->page.paper))
    return wrong (PAPER, texts[PAPER], "a4, a3, letter or tabloid");
  if (texts[ORIENTATION] != NULL && !ut_orientation_from_word (texts[ORIENTATION], &order->page.orientation))
    return wrong (ORIENTATION, texts[ORIENTATION], "portrait or landscape");
  if (texts[OUTPUT] == NULL)
    {
      ut_complain ("page needs --output FILE, a name ending in .pdf, .svg or .png");
      return FALSE;
    }
  return TRUE;
}

static gboolean
read_loop (char *const *texts, UtControlSetup *loop)
{
  static const char *const rules[] = { "exact", "steps", NULL };
  static const char *const starts[] = { "set", "least", "most", NULL };
  guint rule = loop->rule, start = loop->start;

  if (!read_word (texts, RULE, rules, "exact or steps", &rule) || !read_word (texts, START, starts, "set, least or most", &start)
      || !read_number (texts, STEP, 0.001, 100, "dB from 0.001 to 100, with a decimal point", &loop->step_db)
      || !read_number (texts, ERROR, 0, 100, "dB from 0 to 100, with a decimal point", &loop->error_db)
      || !read_whole (texts, DELAY, 1000, "a whole number of rounds from 0 to 1000", &loop->delay)
      || !read_whole (texts, ROUNDS, 10000, "a whole number of rounds from 0 to 10000", &loop->rounds))
    return FALSE;
  loop->rule = (UtControlRule) rule;
  loop->start = (UtControlStart) start;
  return TRUE;
}

static gboolean
read_wish (char *const *texts, UtWish *wish)
{
  const struct
  {
    Option option;
    double least, most;
    double *value;
  } wishes[] = {
    { EFFICIENCY, 0, 100, &wish->bit_s_hz },   { RATE, 0, 1e6, &wish->rate_mbit_s },        { SINR, -400, 400, &wish->sinr_db },
    { BANDWIDTH, 1e-6, 1e6, &wish->bandwidth_mhz }, { CHANNEL, 0, 1e6, &wish->channel_mhz }, { SUBCARRIER, 0, 1e6, &wish->subcarrier_khz },
    { LEVEL, -400, 400, &wish->level_dbm },
  };

  for (gsize i = 0; i < G_N_ELEMENTS (wishes); i++)
    {
      g_autofree char *expected = g_strdup_printf ("a number from %g to %g, with a decimal point", wishes[i].least, wishes[i].most);

      *wishes[i].value = NAN;
      if (!read_number (texts, wishes[i].option, wishes[i].least, wishes[i].most, expected, wishes[i].value))
        return FALSE;
    }
  return TRUE;
}

/* Checks the options against what the verb takes and fills in the order. */
static gboolean
read_options (const Verb *verb, char *const *texts, UtOrder *order)
{
  for (Option option = 0; option < N_OPTIONS; option++)
    if (texts[option] != NULL && !(verb->takes & options[option].taken))
      {
        ut_complain ("%s does not take --%s; see undertone-cli --help", verb->name, options[option].name);
        return FALSE;
      }
  if (texts[FORMAT] != NULL && !read_format (verb, texts[FORMAT], &order->format))
    return wrong (FORMAT, texts[FORMAT], verb->takes & TAKES_CSV ? "text, json or csv" : "text or json");
  order->output = texts[OUTPUT];
  if (!read_wish (texts, &order->wish) || !read_question (texts, &order->question) || !read_loop (texts, &order->loop)
      || !read_whole (texts, SEED, G_MAXUINT32, "a whole number from 0 to 4294967295", &order->loop.seed))
    return FALSE;
  if (!read_whole (texts, PORTS, 1024, "a whole number of ports from 1 to 1024", &order->ports))
    return FALSE;
  if (order->ports == 0)
    return wrong (PORTS, texts[PORTS], "a whole number of ports from 1 to 1024");
  return !(verb->takes & TAKES_PAPER) || read_page (texts, order);
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
run (char **words, char *const *texts)
{
  const Verb *verb = words[0] != NULL ? find_verb (words[0]) : NULL;
  UtOrder order = {
    .question = { .reserves = TRUE, .chances = TRUE, .remedies = TRUE },
    .loop = { .step_db = 1, .seed = 1, .rounds = 30 },
    .ports = 1,
  };

  if (words[0] == NULL)
    {
      ut_complain ("no verb given; expected %s, see undertone-cli --help", verb_names);
      return UT_EXIT_WRONG_USE;
    }
  if (verb == NULL)
    {
      ut_complain ("there is no verb \"%s\"; expected %s", words[0], verb_names);
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
  GOptionEntry entries[N_OPTIONS + 4] = {
    { "help", 'h', 0, G_OPTION_ARG_NONE, &help, NULL, NULL },
    { "version", 0, 0, G_OPTION_ARG_NONE, &version, NULL, NULL },
    { G_OPTION_REMAINING, 0, 0, G_OPTION_ARG_FILENAME_ARRAY, &words, NULL, NULL },
  };
  char *no_words[] = { NULL };
  UtExit exit = UT_EXIT_DONE;

  for (Option option = 0; option < N_OPTIONS; option++)
    entries[3 + option] = (GOptionEntry){ options[option].name, 0, 0, options[option].type, &texts[option], NULL, NULL };
  setlocale (LC_ALL, "");
  /* What programs may read stays English. */
  setlocale (LC_MESSAGES, "C");
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
    exit = run (words != NULL ? words : no_words, texts);

  for (Option option = 0; option < N_OPTIONS; option++)
    g_free (texts[option]);
  return (int) exit;
}
