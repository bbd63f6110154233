"""Known differences of single functions: one side gives a value where the other gives another one, or an error.

The references of OpenFormula are to ODF 1.3 part 4, section numbers from memory.
"""

from __future__ import annotations

from tests.differential.conditions import (
    DIGITS,
    EXPONENT,
    FRACTION,
    LARGE,
    LATE,
    LOGICAL_RESULT,
    MANY,
    NEGATIVE,
    NUMBERS,
    ODD_LIFE,
    OURS_ONLY,
    PASSED_ON,
    SINGLE_RESULT,
    TEXTS,
    THEIRS_ONLY,
    TINY,
    UNSORTED,
    has,
)  # fmt: skip
from tests.differential.known import Known, record

__all__ = ["FUNCTIONS"]

FUNCTIONS: tuple[Known, ...] = (
    record(
        "classes out of order",
        "FREQUENCY",
        NUMBERS | OURS_ONLY,
        (
            "The bounds of the classes are not sorted upwards; Excel sorts them first, so does the text of "
            "OpenFormula 6.18.29; LibreOffice counts in another order, and refuses bounds that are no numbers."
        ),
        standard="ours",
        excel="ours",
    ),
    record(
        "search in disorder",
        "LOOKUP MATCH VLOOKUP HLOOKUP",
        UNSORTED,
        (
            "The values are not sorted: OpenFormula (6.14.8 to 6.14.12) says nothing of the result. Ours is the "
            "bisection of Excel; LibreOffice finds another place, or none."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "search for a blank or in text",
        "LOOKUP MATCH VLOOKUP HLOOKUP",
        has("blank", "text"),
        ("A blank cell is searched for as 0 by Excel; LibreOffice finds nothing."),
        standard="silent",
        excel="ours",
    ),
    record(
        "wildcards and numbers",
        """
        AVERAGEIF AVERAGEIFS COUNTIF COUNTIFS DAVERAGE DCOUNT DCOUNTA DMAX DMIN DPRODUCT DSTDEV DSTDEVP DSUM
        DVAR DVARP MAXIFS MINIFS SUMIF SUMIFS
        """,
        has("text", "numeric text", "empty text") & (NUMBERS | THEIRS_ONLY | OURS_ONLY),
        (
            "LibreOffice lets a pattern such as * meet numbers (by their digits) and blank cells meet other "
            "criteria; to Excel a pattern asks for text, text that spells the number is that number, a blank row "
            "of criteria asks for nothing, and a criterion out of an area that does not reach the row is an error "
            "that no cell meets."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "criterion that is no text",
        "COUNTIF COUNTIFS SUMIF SUMIFS AVERAGEIF AVERAGEIFS MAXIFS MINIFS",
        has("blank") | PASSED_ON,
        (
            "A criterion that is blank asks for 0 in Excel; one that is an error asks for that error, where "
            "LibreOffice passes it on."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "field of a list",
        "DCOUNT DCOUNTA DSUM DAVERAGE DMAX DMIN DPRODUCT DGET DSTDEV DSTDEVP DVAR DVARP",
        NUMBERS | THEIRS_ONLY | OURS_ONLY,
        (
            "Field 0 or a blank field counts whole rows in LibreOffice, criteria under a heading that the list "
            "has not are an error there and met by no row here, and the variance of one number is 0 there but "
            "#DIV/0! in Excel."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "depreciation at odd values",
        "SYD DDB DB VDB",
        ODD_LIFE,
        (
            "A salvage above the cost or below zero, or a period outside the life: LibreOffice refuses the first "
            "and works out the others; Excel the other way round. OpenFormula states constraints (6.12) but not "
            "what breaks them."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "interest over broken periods",
        "CUMIPMT CUMPRINC",
        THEIRS_ONLY | (NUMBERS & FRACTION),
        ("A first period with a fraction, or a last one before it: refused here, cut to whole periods by LibreOffice."),
        standard="silent",
        excel="unknown",
    ),
    record(
        "rates that are not found",
        "RATE IRR XIRR YIELD MIRR IPMT PMT NPER",
        THEIRS_ONLY | OURS_ONLY,
        ("The iteration ends elsewhere: one side finds a rate far from the guess, the other none."),
        standard="silent",
        excel="unknown",
    ),
    record(
        "days before the first",
        "XNPV XIRR",
        NUMBERS | THEIRS_ONLY,
        (
            "Excel documents #NUM! where a day lies before the first one, or values of one sign only; LibreOffice "
            "goes on."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "rates and ratios outside their range",
        "EFFECT NOMINAL RRI",
        THEIRS_ONLY,
        ("Excel documents #NUM! for a rate of 0 or less; LibreOffice goes on."),
        standard="silent",
        excel="ours",
    ),
    record(
        "probabilities at their ends",
        """
        BETA.INV BETADIST BETAINV BINOM.DIST BINOM.INV BINOMDIST CHIDIST CRITBINOM EXPON.DIST EXPONDIST
        F.INV GEOMEAN HYPGEOM.DIST HYPGEOMDIST LOGNORMDIST NEGBINOM.DIST NEGBINOMDIST
        """,
        THEIRS_ONLY | (OURS_ONLY & NEGATIVE),
        (
            "Excel gives #NUM! for a probability of 0 or 1 and outside the documented range; LibreOffice gives "
            "the limit."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "large degrees of freedom",
        "CHISQ.DIST.RT FDIST F.DIST.RT",
        OURS_ONLY,
        ("LibreOffice refuses arguments that are larger than its series can take."),
        standard="silent",
        excel="unknown",
    ),
    record(
        "tails of distributions",
        "CONFIDENCE.NORM ERF GAUSS T.INV T.INV.2T TINV Z.TEST ZTEST",
        NUMBERS | OURS_ONLY,
        ("LibreOffice loses digits in the far tail by cancellation."),
        standard="ours",
        excel="ours",
    ),
    record(
        "expected value of zero",
        "CHISQ.TEST CHITEST",
        THEIRS_ONLY,
        ("An expected value of 0 or a blank: #DIV/0! in Excel; LibreOffice leaves the pair out."),
        standard="silent",
        excel="ours",
    ),
    record(
        "combinations beyond the set",
        "COMBINA COMBIN FACTDOUBLE MULTINOMIAL LCM",
        OURS_ONLY | THEIRS_ONLY,
        (
            "Excel allows more to choose than there are with repetition, FACTDOUBLE(-1) = 1, and cuts fractions "
            "first; LibreOffice refuses them. MULTINOMIAL of more than 170 in sum is beyond the factorials of "
            "Excel."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "whole numbers for bits",
        "BITAND BITOR BITXOR BITLSHIFT BITRSHIFT",
        THEIRS_ONLY,
        ("Excel documents #NUM! for a number that is not whole; LibreOffice cuts it."),
        standard="silent",
        excel="ours",
    ),
    record(
        "places of a negative number",
        "DEC2BIN DEC2HEX DEC2OCT BIN2HEX BIN2OCT HEX2BIN HEX2OCT OCT2BIN OCT2HEX",
        OURS_ONLY | TEXTS,
        (
            "Excel ignores the number of places for a negative number; LibreOffice refuses too few, and a "
            "fraction is cut towards zero."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "multiples of opposite sign",
        "CEILING.MATH CEILING.PRECISE FLOOR.MATH FLOOR.PRECISE MROUND",
        THEIRS_ONLY | NUMBERS,
        ("Excel documents #NUM! where number and multiple differ in sign; LibreOffice drops the sign."),
        standard="silent",
        excel="ours",
    ),
    record(
        "remainder of large numbers",
        "MOD",
        LARGE | TINY,
        (
            "Excel gives #NUM! from a quotient of 1.125E+15 on and takes the quotient at 15 digits below it; "
            "LibreOffice takes the floating-point remainder or refuses."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "parts of a time",
        "TIME",
        FRACTION | NEGATIVE | LARGE,
        (
            "Hours, minutes and seconds are cut to whole numbers by Excel; LibreOffice counts their fractions "
            "(OpenFormula 6.10.17 does too)."
        ),
        standard="LibreOffice",
        excel="ours",
    ),
    record(
        "years of dates",
        "DATE",
        NUMBERS | THEIRS_ONLY,
        (
            "Years below 1900 are counted from 1900 by Excel, which ends with 9999; LibreOffice reads two digits "
            "as 1930 to 2029 and goes on."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "text of more than it has",
        "LEFT LEFTB RIGHT RIGHTB MID MIDB REPLACE REPLACEB SUBSTITUTE FIXED TRUNC REPT",
        OURS_ONLY,
        (
            "A length or place beyond what LibreOffice can count, or behind the end of the text, is an error "
            "there; Excel takes what there is."
        ),
        standard="ours",
        excel="ours",
    ),
    record(
        "bytes of characters",
        "LENB LEFTB RIGHTB MIDB FINDB SEARCHB REPLACEB CODE CHAR UNICHAR UNICODE",
        TEXTS | NUMBERS | THEIRS_ONLY,
        (
            "CHAR and CODE follow the code page of the machine (here Windows-1252 as in Excel for Western "
            "languages, UTF-8 for LibreOffice on Linux); a character of code 0 is no text in Excel, and control "
            "characters cannot be saved in XML."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "searching for nothing",
        "FIND FINDB SEARCH SEARCHB",
        OURS_ONLY,
        ("Empty text is found at the start by Excel; LibreOffice does not find it."),
        standard="ours",
        excel="ours",
    ),
    record(
        "letters of an address",
        "ENCODEURL",
        TEXTS | OURS_ONLY,
        ("LibreOffice encodes full stops and hyphens too and refuses empty text."),
        standard="silent",
        excel="ours",
    ),
    record(
        "amounts and formats of the locale",
        "DOLLAR TEXT FIXED",
        TEXTS | THEIRS_ONLY | OURS_ONLY,
        (
            "Negative dollars stand in brackets in Excel; days that are none are #VALUE! there; LibreOffice ends "
            "fractions and decimals elsewhere."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "numbers in text",
        "NUMBERVALUE VALUE",
        NUMBERS | THEIRS_ONLY | OURS_ONLY,
        ("Excel reads currency signs, times and empty text as numbers; LibreOffice wants digits alone."),
        standard="silent",
        excel="ours",
    ),
    record(
        "Roman numbers and styles of address",
        "ROMAN ADDRESS",
        TEXTS | THEIRS_ONLY,
        ("A style of address outside 1 to 4 is #VALUE! in Excel; a shortened Roman number is another one."),
        standard="silent",
        excel="ours",
    ),
    record(
        "row of the own cell",
        "ROW COLUMN",
        NUMBERS & MANY,
        (
            "Without an argument in an array formula LibreOffice gives the row or column of each cell, ours that "
            "of the first."
        ),
        standard="silent",
        excel="unknown",
    ),
    record(
        "text of a link in an array",
        "HYPERLINK",
        has("text", "number", "numeric text", "empty text", "blank", "error"),
        ("LibreOffice gives two rows, the text shown and the address; a blank text is shown as 0 there."),
        standard="ours",
        excel="ours",
    ),
    record(
        "kind of an area",
        "TYPE",
        NUMBERS | OURS_ONLY,
        ("An area is of kind 64 in Excel; LibreOffice takes one cell of it."),
        standard="silent",
        excel="ours",
    ),
    record(
        "negative height",
        "OFFSET",
        OURS_ONLY,
        ("Excel counts a negative height or width backwards, OpenFormula (6.14.11) asks for positive ones."),
        standard="LibreOffice",
        excel="ours",
    ),
    record(
        "kind of a formula",
        "ISFORMULA FORMULATEXT",
        NUMBERS | THEIRS_ONLY | OURS_ONLY | PASSED_ON,
        (
            "LibreOffice turns logical and error constants of an .xlsx file into formulas, and answers for each "
            "cell of an area or refuses it."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "statistics of too few pairs",
        "LINEST LOGEST TREND GROWTH",
        OURS_ONLY | DIGITS,
        (
            "With no degrees of freedom, or one pair, LibreOffice refuses where Excel gives the line; nearly "
            "dependent columns lose digits."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "blank and text in pairs",
        "SUMXMY2 SUMX2MY2 SUMX2PY2",
        has("blank", "text", "numeric text"),
        (
            "A pair with a blank or text is left out by Excel and OpenFormula; LibreOffice takes the blank as 0 "
            "or refuses text."
        ),
        standard="ours",
        excel="ours",
    ),
    record(
        "coefficients that are no numbers",
        "SERIESSUM",
        THEIRS_ONLY | OURS_ONLY,
        ("Excel documents #VALUE! for a coefficient that is no number and #NUM! beyond the range of a double."),
        standard="silent",
        excel="ours",
    ),
    record(
        "error passed on",
        """
        CHOOSE DAVERAGE DCOUNT DCOUNTA DMAX DMIN DPRODUCT DSUM EOMONTH ERROR.TYPE GROWTH HLOOKUP IF ISERR
        ISERROR ISNA LINEST LOGEST LOOKUP MATCH MMULT SWITCH TREND VLOOKUP
        """,
        PASSED_ON,
        (
            "An error among the arguments: counted, compared or skipped by one side and passed on by the other; "
            "LibreOffice knows no type number for #NULL!."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "scales",
        "CEILING.MATH FLOOR.MATH ISEVEN ISODD",
        OURS_ONLY,
        ("LibreOffice refuses an area or array where one number is wanted."),
        standard="silent",
        excel="ours",
    ),
    record(
        "exponent of three digits",
        "LEN & CONCATENATE CONCAT TEXTJOIN LEFT RIGHT MID",
        EXPONENT,
        "LibreOffice writes at least three digits of exponent where a large number becomes text, Excel at least two.",
        standard="silent",
        excel="ours",
    ),
    record(
        "argument of a complex number near zero",
        "IMARGUMENT",
        TINY,
        "LibreOffice takes a number below its resolution as 0, which has no argument.",
        standard="ours",
        excel="unknown",
    ),
    record(
        "results of another size",
        "LOOKUP",
        SINGLE_RESULT,
        "The results are one cell or value: LibreOffice reads on behind it where Excel asks for areas of one size.",
        standard="silent",
        excel="unknown",
    ),
    record(
        "search for a calculated logical",
        "LOOKUP MATCH VLOOKUP HLOOKUP",
        LOGICAL_RESULT,
        "In an .ods file a calculated logical is saved as a number; as a number it is searched for here, LibreOffice "
        "finds none among numbers.",
        standard="both",
        excel="unknown",
    ),
    record(
        "days after the year 9999",
        "DAY MONTH YEAR WEEKDAY WEEKNUM ISOWEEKNUM HOUR MINUTE SECOND EDATE EOMONTH DAYS DAYS360 TEXT WORKDAY DATEDIF",
        LATE,
        "The days of Excel end with 31 December 9999, serial number 2958465; LibreOffice goes on.",
        standard="silent",
        excel="ours",
    ),
)
