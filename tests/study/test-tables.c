/* What plan/ lets into a file and what radio/ knows are the same, though the two do not know each other. */
#include <string.h>

#include "laws.h"
#include "material.h"
#include "plan-read.h"
#include "site.h"

static gboolean
is_accepted (const char *base, const char *material)
{
  g_autofree char *text = g_strdup_printf (
    "{\"undertone\": 1, \"carrier\": {\"frequency_mhz\": 3600, \"bandwidth_mhz\": 20, \"sharing\": \"orthogonal\"}, \"propagation\": {\"base\": %s},"
    "\"constructions\": [{\"id\": \"K\", \"layers\": [{\"material\": \"%s\", \"thickness_mm\": 10}]}],"
    "\"storeys\": [], \"antennas\": [], \"cells\": [], \"terminals\": [], \"measured_gains_db\": {}}",
    base,
    material);
  g_autoptr (GPtrArray) faults = ut_faults_new ();
  g_autoptr (UtPlan) plan = (UtPlan *) ut_plan_read (text, strlen (text), faults);

  return plan != NULL;
}

static void
test_materials (void)
{
  gsize n;
  const UtMaterial *all = ut_materials (&n);

  for (gsize i = 0; i < n; i++)
    g_assert_true (is_accepted ("{\"law\": \"free-space\"}", all[i].id));
  g_assert_false (is_accepted ("{\"law\": \"free-space\"}", "cheese"));
}

static void
test_laws (void)
{
  for (guint kind = 0; ut_law_name ((UtLawKind) kind) != NULL; kind++)
    {
      /* With every parameter that any law asks for. */
      g_autofree char *base = g_strdup_printf ("{\"law\": \"%s\", \"exponent\": 2, \"reference_m\": 1, \"environment\": \"office\", \"clutter\": \"sl\", \"coefficient\": 30}", ut_law_name ((UtLawKind) kind));
      g_assert_true (is_accepted (base, "wood"));
    }
  g_assert_false (is_accepted ("{\"law\": \"guesswork\"}", "wood"));
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/tables/materials", test_materials);
  g_test_add_func ("/tables/laws", test_laws);
  return g_test_run ();
}
