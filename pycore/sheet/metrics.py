"""How wide text will be, before any browser has seen it.

The heat line is laid out here, in Python, so that nothing on it can overlap; for that the advance
widths of the sheet's own typeface are needed. Read once from the two font files in fonts/ (units of
1/1000 em); a glyph the face lacks counts as a wide one.
"""
import functools

POINT_MM = 25.4 / 72

CODES = (
    32, 33, 34, 35, 36, 37, 38, 39, 40, 41, 42, 43, 44, 45, 46, 47, 48, 49, 50, 51, 52, 53, 54, 55, 56, 57,
    58, 59, 60, 61, 62, 63, 64, 65, 66, 67, 68, 69, 70, 71, 72, 73, 74, 75, 76, 77, 78, 79, 80, 81, 82, 83,
    84, 85, 86, 87, 88, 89, 90, 91, 92, 93, 94, 95, 96, 97, 98, 99, 100, 101, 102, 103, 104, 105, 106, 107,
    108, 109, 110, 111, 112, 113, 114, 115, 116, 117, 118, 119, 120, 121, 122, 123, 124, 125, 126, 160, 161,
    162, 163, 164, 165, 166, 167, 168, 169, 170, 171, 172, 174, 175, 176, 177, 178, 179, 180, 182, 183, 184,
    185, 186, 187, 188, 189, 190, 191, 192, 193, 194, 195, 196, 197, 198, 199, 200, 201, 202, 203, 204, 205,
    206, 207, 208, 209, 210, 211, 212, 213, 214, 215, 216, 217, 218, 219, 220, 221, 222, 223, 224, 225, 226,
    227, 228, 229, 230, 231, 232, 233, 234, 235, 236, 237, 238, 239, 240, 241, 242, 243, 244, 245, 246, 247,
    248, 249, 250, 251, 252, 253, 254, 255, 258, 305, 338, 339, 710, 730, 732, 768, 769, 771, 772, 776, 8201,
    8211, 8212, 8216, 8217, 8218, 8220, 8221, 8222, 8226, 8230, 8249, 8250, 8260, 8364, 8482,)
REGULAR = (
    280, 286, 301, 651, 592, 919, 731, 160, 299, 299, 485, 606, 210, 362, 210, 387, 648, 407, 548, 576, 614,
    588, 598, 510, 615, 595, 210, 210, 553, 628, 553, 480, 778, 626, 613, 645, 669, 569, 552, 694, 694, 392,
    512, 631, 541, 824, 693, 714, 592, 724, 614, 592, 558, 690, 593, 856, 623, 575, 607, 317, 387, 344, 552,
    372, 243, 525, 566, 485, 564, 538, 314, 558, 550, 252, 245, 492, 262, 845, 550, 548, 566, 574, 349, 471,
    326, 540, 461, 684, 481, 449, 460, 344, 237, 344, 555, 280, 286, 485, 610, 580, 575, 237, 528, 368, 798,
    371, 562, 602, 798, 356, 352, 579, 382, 383, 243, 509, 240, 265, 256, 380, 562, 816, 820, 867, 450, 626,
    626, 626, 626, 626, 626, 891, 645, 569, 569, 569, 569, 392, 392, 392, 392, 689, 693, 714, 714, 714, 714,
    714, 532, 714, 690, 690, 690, 690, 575, 592, 582, 525, 525, 525, 525, 525, 525, 866, 485, 538, 538, 538,
    538, 252, 252, 252, 266, 565, 550, 548, 548, 548, 548, 548, 606, 548, 540, 540, 540, 540, 449, 566, 449,
    626, 252, 1006, 924, 403, 298, 409, 0, 0, 0, 0, 0, 140, 504, 824, 236, 236, 236, 399, 399, 399, 438, 670,
    353, 353, 586, 664, 874,)
BOLD = (
    312, 303, 390, 765, 610, 969, 725, 210, 335, 335, 485, 595, 271, 373, 272, 440, 659, 440, 579, 600, 624,
    607, 626, 537, 624, 571, 272, 272, 569, 612, 569, 547, 781, 678, 643, 658, 688, 597, 566, 718, 701, 424,
    561, 663, 552, 858, 717, 746, 629, 756, 650, 610, 607, 686, 644, 886, 685, 650, 618, 340, 440, 344, 582,
    400, 288, 552, 596, 510, 596, 563, 365, 593, 571, 300, 259, 555, 318, 882, 571, 576, 596, 599, 376, 508,
    376, 567, 530, 740, 539, 521, 505, 381, 254, 381, 537, 312, 303, 510, 634, 593, 650, 254, 555, 432, 798,
    390, 649, 615, 798, 383, 394, 611, 402, 407, 288, 521, 294, 297, 284, 403, 649, 846, 852, 921, 526, 678,
    678, 678, 678, 678, 678, 966, 658, 597, 597, 597, 597, 424, 424, 424, 424, 708, 717, 746, 746, 746, 746,
    746, 536, 746, 686, 686, 686, 686, 650, 629, 621, 552, 552, 552, 552, 552, 552, 878, 510, 563, 563, 563,
    563, 300, 300, 300, 314, 588, 571, 576, 576, 576, 576, 576, 595, 576, 567, 567, 567, 567, 521, 596, 521,
    678, 300, 1024, 936, 468, 343, 450, 0, 0, 0, 0, 0, 156, 501, 832, 269, 269, 269, 479, 479, 479, 438, 780,
    394, 394, 617, 678, 942,)
UNKNOWN = 0.7      # of the em
CAP_HEIGHT = 0.668   # of the em, both weights

_WIDTHS = tuple({chr(code): width / 1000 for code, width in zip(CODES, widths)} for widths in (REGULAR, BOLD))


@functools.lru_cache(maxsize=4000)
def ems(text, bold=False):
    """The length of one line of `text` as a multiple of the type size."""
    widths = _WIDTHS[bool(bold)]
    return sum([widths.get(char, UNKNOWN) for char in text])


def width_mm(text, size_pt, bold=False):
    """The length of one line of `text` in mm, set in `size_pt` points."""
    return ems(text, bold) * size_pt * POINT_MM


def wrap(text, size_pt, room_mm, bold=False):
    """`text` broken into lines no wider than `room_mm`; a word longer than a line is cut."""
    lines, line = [], ""
    for word in text.split(" "):
        while width_mm(word, size_pt, bold) > room_mm and len(word) > 1:
            head = len(word)
            while head > 1 and width_mm(word[:head], size_pt, bold) > room_mm:
                head -= 1
            if line:
                lines.append(line)
                line = ""
            lines.append(word[:head])
            word = word[head:]
        joined = f"{line} {word}" if line else word
        if line and width_mm(joined, size_pt, bold) > room_mm:
            lines.append(line)
            line = word
        else:
            line = joined
    return [*lines, line] if line else lines


@functools.lru_cache(maxsize=500)
def words_of(text, bold):
    """The words of `text` and their lengths in ems."""
    return tuple([ems(word, bold) for word in text.split(" ") if word])


def count_lines(runs, size_pt, room_mm):
    """How many lines a paragraph takes that is set partly bold: `runs` is a list of (text, bold)."""
    room, used, count = room_mm / (size_pt * POINT_MM), 0.0, 1
    for text, bold in runs:
        space = _WIDTHS[bool(bold)][" "]
        for word in words_of(text, bold):
            if used and used + space + word > room:
                count, used = count + 1, 0.0
            while word > room:
                count, word = count + 1, word - room
            used += word + space if used else word
    return count if used else 0


def shorten(text, size_pt, room_mm, bold=False):
    """`text`, ended with an ellipsis where it would not fit on one line of `room_mm`."""
    if width_mm(text, size_pt, bold) <= room_mm:
        return text
    while text and width_mm(text + "…", size_pt, bold) > room_mm:
        text = text[:-1]
    return text.rstrip() + "…"
