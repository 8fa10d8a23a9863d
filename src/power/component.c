#include "component.h"

#include <stdlib.h>
#include <string.h>

/* Who each unknown hears from, and Tarjan's marks. */
typedef struct
{
  size_t *first_arc; /* n + 1 */
  uint32_t *arcs;
  size_t *number; /* order of discovery from 1; 0: not seen yet */
  size_t *low;    /* least number reachable through the open nodes */
  size_t *cursor; /* next arc to follow */
  uint32_t *open; /* nodes whose component is not known yet */
  uint32_t *path; /* the walk's own call stack */
  size_t n_open, n_path, seen;
} Walk;

static void
walk_clear (Walk *walk)
{
  free (walk->first_arc);
  free (walk->arcs);
  free (walk->number);
  free (walk->low);
  free (walk->cursor);
  free (walk->open);
  free (walk->path);
}

static bool
walk_init (Walk *walk, const UtSystem *system)
{
  size_t n = system->n_unknowns + 1;
  memset (walk, 0, sizeof *walk);
  walk->first_arc = calloc (n, sizeof *walk->first_arc);
  walk->arcs = malloc ((system->n_terms + 1) * sizeof *walk->arcs);
  walk->number = calloc (n, sizeof *walk->number);
  walk->low = calloc (n, sizeof *walk->low);
  walk->cursor = calloc (n, sizeof *walk->cursor);
  walk->open = calloc (n, sizeof *walk->open);
  walk->path = calloc (n, sizeof *walk->path);
  return walk->first_arc && walk->arcs && walk->number && walk->low && walk->cursor && walk->open
         && walk->path;
}

/* Lists the arcs, each once; `low` serves as the mark of who was listed for this row already. */
static void
list_arcs (Walk *walk, const UtSystem *system)
{
  size_t n_arcs = 0;
  for (size_t i = 0; i < system->n_unknowns; i++)
    {
      walk->first_arc[i] = n_arcs;
      for (size_t k = system->first_piece[i]; k < system->first_piece[i + 1]; k++)
        {
          const UtPiece *piece = &system->pieces[k];
          for (size_t g = piece->first_group; g < piece->first_group + piece->n_groups; g++)
            {
              const UtGroup *group = &system->groups[g];
              for (size_t l = group->first_term; l < group->first_term + group->n_terms; l++)
                {
                  uint32_t j = system->terms[l].unknown;
                  if (system->terms[l].weight > 0 && walk->low[j] != i + 1)
                    {
                      walk->low[j] = i + 1;
                      walk->arcs[n_arcs++] = j;
                    }
                }
            }
        }
    }
  walk->first_arc[system->n_unknowns] = n_arcs;
}

static void
enter (Walk *walk, uint32_t node)
{
  walk->number[node] = walk->low[node] = ++walk->seen;
  walk->cursor[node] = walk->first_arc[node];
  walk->open[walk->n_open++] = node;
  walk->path[walk->n_path++] = node;
}

static int
compare_rows (const void *a, const void *b)
{
  uint32_t x = *(const uint32_t *)a, y = *(const uint32_t *)b;
  return (x > y) - (x < y);
}

/* The open nodes from `root` on are one component. */
static void
close_component (UtComponents *components, Walk *walk, uint32_t root)
{
  size_t begin = components->first[components->n], end = begin;
  uint32_t node;
  do
    {
      node = walk->open[--walk->n_open];
      components->of[node] = components->n;
      components->rows[end++] = node;
    }
  while (node != root);
  qsort (&components->rows[begin], end - begin, sizeof *components->rows, compare_rows);
  for (size_t r = begin; r < end; r++)
    components->place[components->rows[r]] = r - begin;
  if (end - begin > components->largest)
    components->largest = end - begin;
  components->first[++components->n] = end;
}

/* Depth first from `start`; of[] is SIZE_MAX while a node's component is not known. */
static void
explore (UtComponents *components, Walk *walk, uint32_t start)
{
  enter (walk, start);
  while (walk->n_path > 0)
    {
      uint32_t node = walk->path[walk->n_path - 1];
      if (walk->cursor[node] < walk->first_arc[node + 1])
        {
          uint32_t next = walk->arcs[walk->cursor[node]++];
          if (walk->number[next] == 0)
            enter (walk, next);
          else if (components->of[next] == SIZE_MAX && walk->number[next] < walk->low[node])
            walk->low[node] = walk->number[next];
          continue;
        }
      walk->n_path--;
      if (walk->n_path > 0)
        {
          uint32_t parent = walk->path[walk->n_path - 1];
          if (walk->low[node] < walk->low[parent])
            walk->low[parent] = walk->low[node];
        }
      if (walk->low[node] == walk->number[node])
        close_component (components, walk, node);
    }
}

UtPowerStatus
ut_components_init (UtComponents *components, const UtSystem *system)
{
  size_t n = system->n_unknowns;
  memset (components, 0, sizeof *components);
  components->first = calloc (n + 1, sizeof *components->first);
  components->rows = calloc (n + 1, sizeof *components->rows);
  components->of = calloc (n + 1, sizeof *components->of);
  components->place = calloc (n + 1, sizeof *components->place);
  Walk walk;
  bool built = walk_init (&walk, system);
  UtPowerStatus status = UT_POWER_NO_MEMORY;
  if (built && components->first && components->rows && components->of && components->place)
    {
      list_arcs (&walk, system);
      for (size_t i = 0; i < n; i++)
        components->of[i] = SIZE_MAX;
      for (uint32_t i = 0; i < n; i++)
        if (walk.number[i] == 0)
          explore (components, &walk, i);
      status = UT_POWER_OK;
    }
  walk_clear (&walk);
  return status;
}

void
ut_components_clear (UtComponents *components)
{
  free (components->first);
  free (components->rows);
  free (components->of);
  free (components->place);
  memset (components, 0, sizeof *components);
}
