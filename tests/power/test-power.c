/* The power room's tests. */
#include "test-power.h"

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  add_published_tests ();
  add_enumeration_tests ();
  add_property_tests ();
  add_small_tests ();
  return g_test_run ();
}
