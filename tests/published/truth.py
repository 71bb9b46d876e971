"""Where the models stand against published figures, error by error: `python3 build.py truth`.

It prints what the tests of this folder compare; the sources stand beside the figures there.
"""

import numpy as np
import test_bars
import test_critical
import test_hardenability
import test_kinetics
import test_martensite

from pycore.physics import critical, martensite


def row(what, source, count, mean, worst):
    print(f"{what:<48} {source:<38} {count:>5}  {mean:>9}  {worst:>9}")


def errors_row(what, source, errors, unit):
    row(what, source, len(errors), f"{np.abs(errors).mean():.1f} {unit}", f"{errors[np.argmax(np.abs(errors))]:+.1f} {unit}")


def main():
    row("what", "published in", "n", "mean error", "worst")
    for name, formula, column in (("Ac1", critical.andrews_1965_Ac1_C, 8), ("Ac3", critical.andrews_1965_Ac3_C, 9)):
        found = test_critical.handbook_errors(formula, column)
        errors_row(f"{name} by Andrews 1965", "ASM Handbook 4 (1991)", found, "K")
    found = np.array([float(martensite.martensite_start_C(c)) - Ms for _, c, Ms in test_martensite.ATLAS_MS])
    errors_row("Ms by Andrews 1965, van Bohemen 2012", "isothermal atlas", found, "K")
    measured = test_martensite.MIT_52100
    found = np.array([test_martensite.retained_52100(T) - percent for T, percent in measured])
    errors_row("retained austenite of 52100", "MIT thesis, second hand", found, "%")
    steels = [s for s in test_hardenability.MIDDLE if s not in test_hardenability.OUTSIDE_THE_METHOD]
    found = np.concatenate([test_hardenability.misses(steel) for steel in steels])
    row("Jominy curve, share of points inside the band", "SAE J1268", len(found), f"{100 * (found == 0).mean():.0f} %", f"{found.max():.0f} HRC")
    ratios = np.array([test_bars.w_ratio(heat) for heat in range(12)])
    row("critical diameter of W heats in brine, ratio", "Tool Steels, Table 7-3", 12, f"{np.mean(ratios):.2f}", f"{ratios.max():.2f}")
    for soft, becomes, published in ((0.01, "martensite", 140), (0.99, "pearlite", 35)):
        rate = test_kinetics.critical_rate(soft, test_kinetics.COMMERCIAL, 7)
        row(f"rate at which eutectoid steel is all {becomes}", "Callister, fig. 11.28", 1, f"{rate:.0f} K/s", f"for {published}")
    everything, inside = [], []
    for steel, medium, _ in test_bars.CEILINGS:
        errors, held = test_bars.bar_errors(steel, medium)
        errors_row(f"bars of {steel} in {medium}, HRC at three places", "Bethlehem, Modern Steels", errors, "HRC")
        everything.append(errors)
        inside.append(held)
    errors_row("all bars", "Bethlehem, Modern Steels", np.concatenate(everything), "HRC")
    row("… published value inside the band told", "", len(np.concatenate(inside)), f"{100 * np.concatenate(inside).mean():.0f} %", "")


if __name__ == "__main__":
    main()
