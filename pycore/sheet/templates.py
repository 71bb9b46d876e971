"""The templates, found next to this file, set up once and only when first needed."""
import functools
import pathlib

FOLDER = pathlib.Path(__file__).parent
NAMES = ("sheet.html.j2", "saved.html.j2")


@functools.cache
def environment():
    """Jinja2 with escaping always on; a name the view lacks is an error, not a blank."""
    import jinja2

    return jinja2.Environment(autoescape=True, undefined=jinja2.StrictUndefined, trim_blocks=True, lstrip_blocks=True,
                              loader=None, extensions=())


def read(name):
    return (FOLDER / name).read_text(encoding="utf-8")


def module_name(name):
    return "_compiled_" + name.split(".", 1)[0]


@functools.cache
def template(name):
    """The template, from its compiled module when the build has made one, else from its text."""
    import importlib

    from jinja2 import Template

    try:
        module = importlib.import_module("." + module_name(name), __package__)
    except ModuleNotFoundError:
        return environment().from_string(read(name))
    return Template.from_module_dict(environment(), vars(module), environment().globals)


def compiled_modules():
    """File name -> Python source for every template: the build may put these next to this file
    (in the packed copy, never in the repository), which saves the compiling at start-up."""
    return {module_name(name) + ".py": environment().compile(read(name), name, name, raw=True, defer_init=True) for name in NAMES}
