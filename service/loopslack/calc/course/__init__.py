"""A sunny day with no flow: the course of a stagnation, minute by minute.

A lumped dynamic model of the loop: one absorber, one body of collector liquid, one steam zone, one equivalent
pipe cut into cells, station and vessel. It answers when the loop boils, how far steam gets and when, what the
gauge shows, whether the relief valve opens and whether the loop finds back to its filling state. It rests on
assumptions about the liquid left in the collectors for which there is no source, and it never replaces the
coupled balance, which stays the design case. Nothing here sizes anything. Temperatures are in kelvin
throughout.
"""
