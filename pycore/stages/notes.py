"""What stands behind a number: the note shown when it is tapped, and the mark when it is outside a range."""


def note(name, model, inputs, source, valid="", inside=True):
    """One entry of the plan's `why`."""
    return {"name": name, "model": model, "inputs": inputs, "source": source, "range": valid, "inside": inside}


def mark(value, text):
    """A value that is outside its model's range, or could not be computed: shown, never hidden."""
    return {"value": value, "text": text}


def rounded(value, digits=1):
    """A plain float with the digits a sheet can use; None stays None."""
    if value is None:
        return None
    value = float(value)
    if value != value:
        raise ValueError("a stage produced a value that is not a number")
    return round(value, digits)


def nearest(value, step):
    """Round to a step a dial can be set to."""
    return int(round(float(value) / step) * step)
