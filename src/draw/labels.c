#include "labels.h"

GArray *
ut_boxes_new (void)
{
  return g_array_new (FALSE, FALSE, sizeof (UtBox));
}

void
ut_boxes_take (GArray *boxes, double x, double y, double width, double height)
{
  UtBox box = { x, y, width, height };

  g_array_append_val (boxes, box);
}

gboolean
ut_boxes_overlap (const UtBox *one, const UtBox *other)
{
  return one->x < other->x + other->width && other->x < one->x + one->width && one->y < other->y + other->height
         && other->y < one->y + one->height;
}

gboolean
ut_boxes_place (GArray *boxes, const double (*corners)[2], guint n, double width, double height, double *x, double *y)
{
  for (guint i = 0; i < n; i++)
    {
      UtBox box = { corners[i][0], corners[i][1], width, height };
      gboolean is_free = TRUE;

      for (guint k = 0; k < boxes->len && is_free; k++)
        is_free = !ut_boxes_overlap (&box, &g_array_index (boxes, UtBox, k));
      if (!is_free)
        continue;
      *x = box.x;
      *y = box.y;
      g_array_append_val (boxes, box);
      return TRUE;
    }
  return FALSE;
}
