"""Pages that some samples have beside their case: effects, maps, methods, the outside of a pipe."""
