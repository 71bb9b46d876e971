"""Reading a composition: what is not named is not there."""

import numpy as np


def amounts(composition):
    """A function that tells how much of an element a composition holds.

    Inputs: composition {element: wt %}, scalars or arrays. Returns: function of an element's symbol giving wt %, 0 where
        the element is not named.
    Valid: any. Raises: nothing.
    Source: bookkeeping of our own; a certificate names what it measured.
    """
    return lambda element: np.asarray(composition.get(element, 0.0), float)
