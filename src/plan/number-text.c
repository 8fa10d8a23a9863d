#include "plan-write.h"

#include <float.h>
#include <math.h>
#include <string.h>

/* Integers beyond this are written with an exponent: as plain digits a reader could take them for
 * exact. */
#define PLAIN_MOST 9007199254740992.0
#define PLAIN_LEAST_EXPONENT (-6)

/* Turns "d.ddde±x" into the next larger number of as many digits; FALSE where that would need
 * another exponent. */
static gboolean
step_up (char *scientific)
{
  for (char *p = strchr (scientific, 'e') - 1; p >= scientific; p--)
    {
      if (*p == '.')
        continue;
      if (*p != '9')
        {
          (*p)++;
          return TRUE;
        }
      *p = '0';
    }
  return FALSE;
}

static gboolean
reads_back (const char *text, double value)
{
  return g_ascii_strtod (text, NULL) == value;
}

/* The fewest digits that read back, as "d.ddde±x".  With 15 digits or fewer, %.15e and its trailing
 * zeros cut is the shortest already, save for subnormal numbers, whose last digits are worth less.
 * At a power of two the doubles above lie twice as far apart as those below: there the next larger
 * decimal can read back where the nearest does not. */
static void
shortest (double value, char *buffer, int size)
{
  char format[] = "%.00e";
  for (int digits = fabs (value) < DBL_MIN ? 1 : 15; digits <= 17; digits++)
    {
      format[2] = (char)('0' + (digits - 1) / 10);
      format[3] = (char)('0' + (digits - 1) % 10);
      g_ascii_formatd (buffer, size, format, value);
      if (reads_back (buffer, value)
          || (digits == 16 && step_up (buffer) && reads_back (buffer, value)))
        return;
    }
}

/* "d.ddde±x" taken apart: the digits without trailing zeros, and x. */
static int
take_apart (const char *scientific, char *digits)
{
  const char *e = strchr (scientific, 'e');
  int n = 0;
  for (const char *p = scientific; p < e; p++)
    if (g_ascii_isdigit (*p))
      digits[n++] = *p;
  while (n > 1 && digits[n - 1] == '0')
    n--;
  digits[n] = '\0';
  return (int)g_ascii_strtoll (e + 1, NULL, 10);
}

static void
lay_out_plain (GString *out, const char *digits, int exponent)
{
  int n = (int)strlen (digits);
  if (exponent < 0)
    {
      g_string_append (out, "0.");
      for (int i = -1; i > exponent; i--)
        g_string_append_c (out, '0');
      g_string_append (out, digits);
      return;
    }
  for (int i = 0; i < MAX (n, exponent + 1); i++)
    {
      if (i == exponent + 1)
        g_string_append_c (out, '.');
      g_string_append_c (out, i < n ? digits[i] : '0');
    }
}

static void
lay_out_scientific (GString *out, const char *digits, int exponent)
{
  g_string_append_c (out, digits[0]);
  if (digits[1] != '\0')
    g_string_append_printf (out, ".%s", digits + 1);
  g_string_append_printf (out, "e%d", exponent);
}

char *
ut_number_text (double value, char *buffer)
{
  char scientific[G_ASCII_DTOSTR_BUF_SIZE], digits[G_ASCII_DTOSTR_BUF_SIZE];
  g_return_val_if_fail (isfinite (value), NULL);

  if (value == 0)
    return strcpy (buffer, "0");
  shortest (fabs (value), scientific, sizeof scientific);
  int exponent = take_apart (scientific, digits);

  g_autoptr (GString) out = g_string_new (value < 0 ? "-" : "");
  if (fabs (value) <= PLAIN_MOST && exponent >= PLAIN_LEAST_EXPONENT)
    lay_out_plain (out, digits, exponent);
  else
    lay_out_scientific (out, digits, exponent);
  g_strlcpy (buffer, out->str, G_ASCII_DTOSTR_BUF_SIZE);
  return buffer;
}
