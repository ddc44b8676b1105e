"""Seeded slips in sound designs: what the reasoning finds, roots, names, and how often.

- A *design* is one case of `tests.properties.sound`, worked by `tests.properties.chain`. A *slip* replaces a value at
  its place in the chain by a wrong formula (`wrong`, plain Python, nothing read from the catalogue), and the designer
  goes on with it, so that all that follows carries it.
- *Moved*: a value whose printed number lies farther from each accepted reading of the right one than half its last
  decimal, the tolerance (`TOLERANCE`) and the rounding it inherits.
- *Mismatches*: findings of gravity mismatch or breach about values. *Found*: there is one. A *root* is a mismatch
  that is carried from no other.
- *Root right*: there is a root on a quantity that the slip replaces. *One root*: all other mismatches are carried.
- *First*: the slip of a root is the one made. *Named*: it is among the slips that fit equally.
- *One cause*: one root, on a quantity that the slip replaces, whether that quantity is declared or not.
"""
