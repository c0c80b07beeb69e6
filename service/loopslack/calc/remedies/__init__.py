"""Remedies: what would make a loop hold that does not, each solved for its smallest change and judged anew.

``seek`` is the entry. ``case`` says what is changed, ``changes`` what a change does, ``bench`` tries changed cases,
``measure`` finds smallest amounts; the measures stand in ``settings``, ``vessels``, ``valve``, ``heat`` and
``pipes``, pairs of them in ``pairs``, the cooler that a design lacks to be robust in ``robust``. Nothing here words a
sentence or knows a question.
"""
