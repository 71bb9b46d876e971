"""Which cautions this plan calls for: rules as data, triggered by facts."""

from pycore.data import toml

WORST_FIRST = {"danger": 0, "warning": 1, "caution": 2, "notice": 3}


def cautions(facts):
    """The rules that speak, worst first, in the order of the file within one signal word."""
    spoken = [
        rule
        for rule in toml("cautions")["rule"]
        if all(fact in facts for fact in rule["when"]) and not any(fact in facts for fact in rule.get("unless", ()))
    ]
    spoken.sort(key=lambda rule: WORST_FIRST[rule["signal"]])
    return tuple({key: rule[key] for key in ("id", "signal", "step", "text", "because", "source")} for rule in spoken)
