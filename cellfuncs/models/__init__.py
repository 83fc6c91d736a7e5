"""Flows that are solved, not estimated, so that the cost of a dropped term can be told.

Every model takes dimensionless inputs and gives its answer with an estimate of its own error: the same equations on
two resolutions, compared. ``trust.py`` has the rule by which an answer is given or refused; ``answers/`` gives the
models their dimensional face.

One file a flow: ``duct*.py``, ``gap.py`` (with ``film.py``, ``thinning.py`` and, while the film is still warming,
``developing_film.py``), ``plate.py``, ``free.py``, ``body.py``, ``balance.py`` (one-dimensional) and
``compressible.py`` (falling density); ``chebyshev.py`` has the points that they share.
"""
