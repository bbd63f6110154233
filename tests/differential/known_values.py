"""Known differences by the kind of argument: one side gives a value where the other gives another one, or an error.

The references of OpenFormula are to ODF 1.3 part 4, section numbers from memory.
"""

from __future__ import annotations

from tests.differential.conditions import (
    DIGITS,
    EARLY,
    EARLY_TERM,
    ERROR_CONSTANT,
    FRACTION,
    LEFT_OUT,
    NUMBERS,
    OURS_ONLY,
    THEIRS_ONLY,
    WORD,
    ZERO_POWER,
    has,
)  # fmt: skip
from tests.differential.known import Known, record

__all__ = ["KINDS"]

KINDS: tuple[Known, ...] = (
    record(
        "error in an array constant",
        "",
        ERROR_CONSTANT,
        ("LibreOffice 7.4 does not read an error value inside an array constant and refuses the formula."),
        standard="ours",
        excel="ours",
        errors=None,
    ),
    record(
        "logical",
        """
        & < <= <> = > >= ACCRINT ADDRESS ASC AVEDEV AVERAGE AVERAGEIF AVERAGEIFS BESSELJ BESSELK BESSELY
        BETAINV BIN2DEC BIN2HEX BIN2OCT BINOM.DIST BINOMDIST CHAR CHISQ.DIST CHITEST CLEAN CODE COMBINA
        COMPLEX CONCAT CONCATENATE CONVERT CORREL COUNT COUNTIF COUNTIFS COUPDAYS COUPDAYSNC COUPNCD COVAR
        COVARIANCE.P COVARIANCE.S CUMIPMT DATE DAVERAGE DAY DAYS360 DCOUNT DCOUNTA DELTA DEVSQ DMAX DPRODUCT
        DSTDEV DSUM DURATION DVAR ENCODEURL ERF ERF.PRECISE ERFC ERFC.PRECISE EXPONDIST F.DIST F.TEST FIXED
        FORECAST FORECAST.LINEAR FORMULATEXT FREQUENCY FTEST GCD GEOMEAN GESTEP HARMEAN HEX2BIN HEX2DEC
        HEX2OCT HLOOKUP HYPERLINK HYPGEOM.DIST HYPGEOMDIST IFS IMAGINARY IMARGUMENT IMCONJUGATE IMCOS IMCOSH
        IMCOT IMCSCH IMDIV IMEXP IMLN IMLOG10 IMLOG2 IMPOWER IMREAL IMSEC IMSECH IMSIN IMSINH IMSQRT IMSUM
        IMTAN INTERCEPT INTRATE ISFORMULA ISLOGICAL ISNUMBER KURT LARGE LCM LEFT LEFTB LEN LINEST LOGEST
        LOOKUP LOWER MATCH MAX MAXIFS MDETERM MEDIAN MIN MINIFS MMULT MOD MODE MODE.MULT MODE.SNGL MONTH
        MULTINOMIAL NEGBINOM.DIST NEGBINOMDIST NETWORKDAYS.INTL NORM.DIST NPV NUMBERVALUE OCT2BIN OCT2DEC
        OCT2HEX OFFSET PEARSON PERCENTILE PERCENTILE.EXC PERCENTILE.INC POISSON POISSON.DIST POWER PRICE
        PRICEDISC PRICEMAT PRODUCT PROPER QUARTILE QUARTILE.EXC QUARTILE.INC RANK RANK.AVG RANK.EQ REPLACE
        REPLACEB REPT RIGHT RIGHTB RSQ SEARCHB SERIESSUM SKEW SKEW.P SLOPE SMALL STDEV STDEV.P STDEV.S
        STDEVP STEYX SUBSTITUTE SUM SUMIF SUMIFS SUMPRODUCT SUMSQ SUMX2PY2 SUMXMY2 SYD TEXT TEXTJOIN TIME
        TREND TRIM TRIMMEAN TTEST TYPE UNICHAR UNICODE UPPER VALUE VAR VAR.P VAR.S VARP VDB VLOOKUP XNPV
        YEAR YEARFRAC YIELD ZTEST ^
        """,
        has("logical"),
        (
            'LibreOffice has no logical type: TRUE and FALSE are the numbers 1 and 0, join as "1" and "0", count '
            "in areas and compare with numbers. OpenFormula (4.5 and 4.6) lets logicals be numbers or a type of "
            "their own; here they are a type of their own, as in Excel: they come after text in order, are "
            "skipped in areas, join as words, and functions that once were an add-in refuse them."
        ),
        standard="both",
        excel="ours",
    ),
    record(
        "text that spells no number",
        """
        % * + - / ABS ACOS ADDRESS ASIN ASINH ATAN ATANH BESSELJ BESSELK BETAINV BINOM.DIST BITAND CEILING
        CHAR CHIINV CHISQ.DIST CHISQ.DIST.RT CHISQ.INV.RT COMBIN COMPLEX CONFIDENCE.NORM COS COSH COTH
        COUPDAYSNC COUPNCD CSC CUMPRINC DATE DAY DAYS DCOUNT DCOUNTA DEC2BIN DEGREES DELTA DURATION EDATE
        ERF ERFC ERFC.PRECISE EVEN EXP FACT FISHER FISHERINV FLOOR FV FVSCHEDULE GAMMA GAMMA.INV GAMMALN GCD
        GESTEP HEX2OCT HYPGEOM.DIST IMDIV IMSUB IMSUM INDEX INDIRECT INT INTRATE ISOWEEKNUM ISPMT LCM LEFT
        LINEST LN LOG10 LOGEST LOGNORMDIST MDURATION MOD MROUND NETWORKDAYS NOMINAL NORM.DIST NORMSDIST
        NUMBERVALUE ODD PDURATION PERCENTILE PERCENTILE.INC PERCENTRANK.EXC PERMUT POISSON.DIST POWER
        PRICEMAT PV RADIANS ROUND ROUNDDOWN ROUNDUP SEC SECOND SIGN SIN SINH SQRT SQRTPI STANDARDIZE SYD
        T.DIST.2T T.DIST.RT T.INV T.INV.2T T.TEST TAN TANH TBILLPRICE TEXT TRUNC WEEKNUM WORKDAY.INTL
        YEARFRAC YIELDDISC ^ negation
        """,
        WORD,
        (
            "LibreOffice reads the word TRUE as the number 1 and, by its default setting, other text in some "
            'places as 0. Excel, and OpenFormula where text cannot be converted, give an error (6.3.5: "may '
            'return an Error").'
        ),
        standard="both",
        excel="ours",
    ),
    record(
        "empty text",
        """
        * + - / AND ENCODEURL FIND IMPRODUCT IMSUM MODE MULTINOMIAL NUMBERVALUE OR REPLACEB SEARCHB
        SUBSTITUTE YEARFRAC ^
        """,
        has("empty text"),
        (
            "LibreOffice takes empty text as nothing: as 0 in arithmetic and complex numbers, as an error inside "
            "array constants of logicals and as not found where searched for. OpenFormula leaves the conversion "
            "of empty text to the application."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "text that spells a number",
        """
        ACCRINT BESSELY BETA.DIST BIN2DEC BIN2HEX BIN2OCT BINOM.DIST BINOMDIST BITAND BITOR BITRSHIFT CHAR
        CHISQ.DIST COUNTIF DATE DATEVALUE DAYS360 DCOUNT DCOUNTA DDB DMIN DPRODUCT DSUM DURATION EDATE
        ENCODEURL EXPON.DIST EXPONDIST F.DIST FIND FIXED FREQUENCY GAMMA.DIST GCD HEX2BIN HEX2DEC HEX2OCT IF
        IMABS IMAGINARY IMARGUMENT IMCONJUGATE IMCOS IMCOSH IMCOT IMCSC IMCSCH IMDIV IMEXP IMLN IMLOG10
        IMLOG2 IMPOWER IMPRODUCT IMREAL IMSEC IMSECH IMSIN IMSINH IMSQRT IMSUB IMSUM IMTAN ISEVEN ISODD
        ISOWEEKNUM LCM LEFTB LINEST LOGNORM.DIST MDURATION MROUND MULTINOMIAL NORM.DIST NORM.S.DIST NOT
        NUMBERVALUE OCT2BIN OCT2DEC OCT2HEX OFFSET POISSON POISSON.DIST PRICE RANK REPLACEB REPT SEARCH
        SERIESSUM SUBSTITUTE SUMXMY2 SYD T.DIST TBILLPRICE TBILLYIELD TEXT TIMEVALUE TYPE UNICHAR WEIBULL
        WEIBULL.DIST YEAR
        """,
        has("numeric text"),
        (
            "Which texts spell a number, and whether text in a cell, an array or a condition is converted, "
            "differs: LibreOffice converts only ISO 8601 dates and plain numbers without blanks around them, yet "
            "does so in cells too and as a condition of IF; OpenFormula (6.3.5 and 6.3.15) leaves it to the "
            "application."
        ),
        standard="both",
        excel="ours",
    ),
    record(
        "argument left empty",
        """
        BESSELI BESSELY CUMPRINC DCOUNTA DEC2OCT DELTA EDATE ENCODEURL EOMONTH F.INV FINDB IFNA IMABS
        IMAGINARY IMCONJUGATE IMCOS IMCOSH IMEXP IMPOWER IMREAL IMSEC IMSECH IMSIN IMSINH IMSQRT IMSUB IMSUM
        IMTAN ISEVEN ISODD MATCH MDURATION NUMBERVALUE POISSON.DIST PRICEMAT WORKDAY YIELDDISC
        """,
        LEFT_OUT & OURS_ONLY,
        (
            "LibreOffice refuses an argument that is written but empty, or a blank cell, in functions of its "
            "analysis add-in; Excel takes it as 0, as OpenFormula says of an empty cell (6.3.5)."
        ),
        standard="ours",
        excel="ours",
    ),
    record(
        "days before 1 March 1900",
        """
        DAY MONTH YEAR WEEKDAY WEEKNUM ISOWEEKNUM HOUR MINUTE SECOND EDATE EOMONTH DAYS DAYS360 YEARFRAC
        WORKDAY NETWORKDAYS WORKDAY.INTL NETWORKDAYS.INTL TEXT DATE DATEDIF DATEVALUE
        """,
        EARLY,
        (
            "LibreOffice counts days from 30 December 1899 and goes on below zero; Excel has day 0, its own 29 "
            "February 1900 as day 60, and no negative days. OpenFormula (4.3.2) leaves the epoch to the "
            "application."
        ),
        standard="both",
        excel="ours",
    ),
    record(
        "terms before 1 March 1900",
        """
        ACCRINT ACCRINTM AMORLINC COUPDAYBS COUPDAYS COUPDAYSNC COUPNCD COUPNUM COUPPCD DISC DURATION
        INTRATE MDURATION PRICE PRICEDISC PRICEMAT RECEIVED TBILLEQ TBILLPRICE TBILLYIELD XIRR XNPV YIELD
        YIELDDISC YIELDMAT
        """,
        EARLY_TERM,
        (
            "LibreOffice counts days from 30 December 1899 and goes on below zero; Excel has day 0, its own 29 "
            "February 1900 as day 60, and no negative days. OpenFormula (4.3.2) leaves the epoch to the "
            "application."
        ),
        standard="both",
        excel="ours",
    ),
    record(
        "time of day in a date",
        """
        ACCRINT ACCRINTM AMORLINC COUPDAYBS COUPDAYS COUPDAYSNC COUPNCD COUPNUM COUPPCD DAYS DISC DURATION
        INTRATE MDURATION PRICE PRICEDISC PRICEMAT RECEIVED YIELD YIELDDISC YIELDMAT
        """,
        FRACTION,
        ("Days are whole numbers for these functions in Excel; LibreOffice goes on with the time of day."),
        standard="silent",
        excel="ours",
    ),
    record(
        "bond by year fraction",
        """
        ACCRINT ACCRINTM AMORLINC COUPDAYBS COUPDAYS COUPDAYSNC COUPNCD COUPNUM COUPPCD DISC DURATION
        INTRATE MDURATION PRICE PRICEDISC PRICEMAT RECEIVED YIELD YIELDDISC YIELDMAT
        """,
        NUMBERS,
        (
            "LibreOffice measures terms as year fractions (and its 30/360 as the European or the older American "
            "rule at the end of February), Excel by coupon periods, days of the basis from coupon to coupon, and "
            "caps linear depreciation at cost less salvage."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "bond arguments",
        """
        ACCRINT ACCRINTM AMORLINC COUPDAYBS COUPDAYS COUPDAYSNC COUPNCD COUPNUM COUPPCD DISC DURATION
        INTRATE MDURATION PRICE PRICEDISC PRICEMAT RECEIVED YIELD YIELDDISC YIELDMAT
        """,
        THEIRS_ONLY | OURS_ONLY,
        (
            "The two refuse different arguments: Excel documents the least price, the order of the days and the "
            "days before the issue; LibreOffice finds no yield below -100 % a year."
        ),
        standard="silent",
        excel="ours",
    ),
    record(
        "treasury bill",
        "TBILLEQ TBILLPRICE TBILLYIELD",
        NUMBERS | THEIRS_ONLY,
        (
            "LibreOffice counts one day more for a bill, and accepts terms over a year and results below zero, "
            "for which Excel documents #NUM!. ISO/IEC 29500-1 18.17.7 counts the days from settlement to "
            "maturity."
        ),
        standard="ours",
        excel="ours",
    ),
    record(
        "Bessel functions",
        "BESSELI BESSELJ BESSELK BESSELY",
        DIGITS | THEIRS_ONLY | OURS_ONLY,
        (
            "Excel documents Bessel functions by approximations of 8 digits, to which ours are held by saved "
            "workbooks; LibreOffice sums the series in full. Excel refuses a negative order, LibreOffice takes it "
            "as a whole number."
        ),
        standard="LibreOffice",
        excel="ours",
    ),
    record(
        "trigonometry of large angles",
        "SIN COS TAN SEC CSC COT SECH CSCH COTH",
        THEIRS_ONLY,
        ("From 2^27 radians on Excel gives #NUM!; LibreOffice goes on."),
        standard="silent",
        excel="ours",
    ),
    record(
        "power at its limits",
        "^ POWER",
        ZERO_POWER,
        (
            "0^0 is #NUM! in Excel and 1 in LibreOffice (OpenFormula 6.4.5 and 6.16.46 leave it open); a result "
            "too small for a double is 0 in Excel and an error in LibreOffice."
        ),
        standard="both",
        excel="ours",
    ),
    record(
        "rank of a number that is not there",
        "RANK RANK.EQ RANK.AVG",
        THEIRS_ONLY,
        ("Excel gives #N/A where the number is not in the list; LibreOffice the place it would have."),
        standard="ours",
        excel="ours",
    ),
    record(
        "order statistics at a fraction",
        "LARGE SMALL",
        NUMBERS & FRACTION,
        ("A place with a fraction is rounded up by Excel and cut by LibreOffice."),
        standard="silent",
        excel="ours",
    ),
    record(
        "significance of a rank",
        "PERCENTRANK PERCENTRANK.INC PERCENTRANK.EXC",
        NUMBERS,
        ("Excel cuts the rank to so many digits; LibreOffice rounds it."),
        standard="silent",
        excel="ours",
    ),
    record(
        "most frequent value",
        "MODE MODE.SNGL MODE.MULT",
        NUMBERS,
        ("Of values equally frequent Excel gives the one met first; LibreOffice the smallest."),
        standard="silent",
        excel="ours",
    ),
)
