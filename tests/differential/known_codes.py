"""Known differences in the code of an error: both programs refuse the same arguments, with different words.

OpenFormula asks for an error in these cases but leaves open which one.
"""

from __future__ import annotations

from cellsection.workbook.values import ErrorValue
from tests.differential.conditions import SEVERAL
from tests.differential.known import Condition, Known, record

__all__ = ["CODES"]


def refused(ours: str, shown: str) -> Condition:
    """Both sides give an error, of these codes."""
    return Condition(
        f"ours is {ours}, LibreOffice's is {shown}",
        lambda d: isinstance(d.ours, ErrorValue) and d.ours.code == ours and d.shown == shown,
    )


# Ours, LibreOffice's, why, the functions.
TABLE = (
    (
        "#DIV/0!",
        "#N/A",
        "Excel documents #DIV/0! for what these functions refuse, LibreOffice gives #N/A",
        "CHISQ.TEST SWITCH",
    ),
    (
        "#DIV/0!",
        "#NAME?",
        "Excel documents #DIV/0! for what these functions refuse, LibreOffice gives #NAME?",
        "AVERAGEIF SUM",
    ),
    (
        "#DIV/0!",
        "#NUM!",
        "Excel documents #DIV/0! for what these functions refuse, LibreOffice gives #NUM!",
        "COT COTH CSC CSCH DSTDEV DSTDEVP DVARP ISPMT POWER ^",
    ),
    (
        "#DIV/0!",
        "#REF!",
        "Excel documents #DIV/0! for what these functions refuse, LibreOffice gives #REF!",
        "AVERAGEIF",
    ),
    (
        "#DIV/0!",
        "#VALUE!",
        "Excel documents #DIV/0! for what these functions refuse, LibreOffice gives #VALUE!",
        """
        AVERAGEIF CORREL COVARIANCE.P COVARIANCE.S F.TEST FORECAST FORECAST.LINEAR FTEST INTERCEPT MROUND
        PEARSON RSQ SLOPE STEYX T.TEST TTEST VLOOKUP
        """,
    ),
    (
        "#DIV/0!",
        "Err:502",
        "Err:502 is LibreOffice's one code for an argument outside the range of a function",
        """
        CHISQ.TEST CHITEST DOLLARDE DOLLARFR FLOOR GEOMEAN HLOOKUP IMARGUMENT LCM LOG MDETERM MIRR QUOTIENT
        T.TEST TTEST VLOOKUP Z.TEST ZTEST
        """,
    ),
    (
        "#DIV/0!",
        "Err:504",
        "Err:504 is LibreOffice's code for an argument of a form it does not take",
        "DAVERAGE DSTDEV DSTDEVP DVARP HLOOKUP ISODD LOOKUP MIRR VLOOKUP XNPV",
    ),
    (
        "#N/A",
        "#VALUE!",
        "Excel documents #N/A for what these functions refuse, LibreOffice gives #VALUE!",
        """
        FORMULATEXT MODE MODE.MULT MODE.SNGL PERCENTRANK PERCENTRANK.EXC PERCENTRANK.INC RANK RANK.AVG
        RANK.EQ SUMX2MY2 SUMX2PY2 SUMXMY2 SWITCH VLOOKUP
        """,
    ),
    (
        "#N/A",
        "Err:502",
        "Err:502 is LibreOffice's one code for an argument outside the range of a function",
        """
        CHISQ.TEST CHITEST CONVERT CORREL COVAR COVARIANCE.P COVARIANCE.S FORECAST FORECAST.LINEAR HLOOKUP
        INTERCEPT OFFSET PEARSON RSQ SLOPE STEYX T.TEST TTEST VLOOKUP
        """,
    ),
    (
        "#N/A",
        "Err:504",
        "Err:504 is LibreOffice's code for an argument of a form it does not take",
        "HLOOKUP VLOOKUP WORKDAY XNPV",
    ),
    (
        "#NAME?",
        "#N/A",
        "Excel documents #NAME? for what these functions refuse, LibreOffice gives #N/A",
        "<>",
    ),
    (
        "#NAME?",
        "Err:502",
        "Err:502 is LibreOffice's one code for an argument outside the range of a function",
        "BETAINV MINVERSE",
    ),
    (
        "#NAME?",
        "Err:504",
        "Err:504 is LibreOffice's code for an argument of a form it does not take",
        "IMSUM",
    ),
    (
        "#NULL!",
        "Err:502",
        "Err:502 is LibreOffice's one code for an argument outside the range of a function",
        "PERCENTRANK",
    ),
    (
        "#NULL!",
        "Err:504",
        "Err:504 is LibreOffice's code for an argument of a form it does not take",
        "ISODD",
    ),
    (
        "#NULL!",
        "Err:517",
        "Err:517 is an inner code of LibreOffice",
        "T",
    ),
    (
        "#NUM!",
        "#DIV/0!",
        "Excel documents #NUM! for what these functions refuse, LibreOffice gives #DIV/0!",
        "STANDARDIZE",
    ),
    (
        "#NUM!",
        "#VALUE!",
        "Excel documents #NUM! for what these functions refuse, LibreOffice gives #VALUE!",
        """
        AGGREGATE COS COT CSC FACT LARGE MEDIAN NETWORKDAYS.INTL NORM.INV NORM.S.INV NORMINV NORMSINV
        PERCENTILE PERCENTILE.EXC PERCENTILE.INC PERCENTRANK PERCENTRANK.EXC PERCENTRANK.INC PROB
        QUARTILE.EXC SEC SERIESSUM SIN SMALL TAN TRIMMEAN WORKDAY.INTL XIRR XNPV
        """,
    ),
    (
        "#NUM!",
        "Err:502",
        "Err:502 is LibreOffice's one code for an argument outside the range of a function",
        """
        ACCRINT ACCRINTM ACOSH ACOTH AMORLINC ATANH BASE BESSELI BESSELJ BESSELK BESSELY BETA.DIST BETA.INV
        BETADIST BETAINV BIN2DEC BIN2HEX BIN2OCT BINOM.DIST BINOM.INV BINOMDIST BITAND BITLSHIFT BITOR
        BITRSHIFT BITXOR CEILING CHIDIST CHIINV CHISQ.DIST CHISQ.DIST.RT CHISQ.INV CHISQ.INV.RT COMBIN
        COMBINA CONFIDENCE CONFIDENCE.NORM CONFIDENCE.T COUPDAYBS COUPDAYS COUPDAYSNC COUPNCD COUPNUM
        COUPPCD CRITBINOM CUMIPMT CUMPRINC DATE DATEDIF DAY DB DDB DEC2BIN DEC2HEX DEC2OCT DECIMAL DGET DISC
        DOLLARDE DURATION EFFECT EOMONTH EXPON.DIST EXPONDIST F.DIST F.DIST.RT F.INV F.INV.RT FACT
        FACTDOUBLE FDIST FINV FISHER FLOOR FORECAST FORECAST.LINEAR GAMMA GAMMA.DIST GAMMA.INV GAMMADIST
        GAMMAINV GAMMALN GAMMALN.PRECISE GCD GEOMEAN GROWTH HARMEAN HEX2BIN HEX2DEC HEX2OCT HYPGEOM.DIST
        HYPGEOMDIST IMABS IMAGINARY IMARGUMENT IMCONJUGATE IMCOS IMCOSH IMCOT IMCSC IMCSCH IMDIV IMEXP IMLN
        IMLOG10 IMLOG2 IMPOWER IMPRODUCT IMREAL IMSEC IMSECH IMSIN IMSINH IMSQRT IMSUB IMSUM IMTAN INTRATE
        IPMT LCM LN LOG LOG10 LOGEST LOGINV LOGNORM.DIST LOGNORM.INV LOGNORMDIST MDURATION MINVERSE MONTH
        MULTINOMIAL NEGBINOM.DIST NEGBINOMDIST NETWORKDAYS NETWORKDAYS.INTL NOMINAL NORM.DIST NORM.INV
        NORM.S.INV NORMDIST NORMINV NORMSINV OCT2BIN OCT2DEC OCT2HEX PDURATION PERCENTILE PERCENTILE.EXC
        PERCENTILE.INC PERCENTRANK PERCENTRANK.EXC PERCENTRANK.INC PERMUT PERMUTATIONA POISSON POISSON.DIST
        PPMT PRICE PRICEDISC PRICEMAT PROB QUARTILE QUARTILE.EXC QUARTILE.INC RATE RECEIVED RRI SERIESSUM
        SQRT SQRTPI T.DIST T.DIST.2T T.DIST.RT T.INV T.INV.2T T.TEST TBILLEQ TBILLPRICE TBILLYIELD TDIST
        TIME TINV TRIMMEAN TTEST VDB VLOOKUP WEEKDAY WEEKNUM WEIBULL WEIBULL.DIST WORKDAY WORKDAY.INTL XIRR
        XNPV YEAR YEARFRAC YIELD YIELDDISC YIELDMAT
        """,
    ),
    (
        "#NUM!",
        "Err:504",
        "Err:504 is LibreOffice's code for an argument of a form it does not take",
        "DGET GCD HLOOKUP IRR LARGE LOOKUP PERCENTILE.EXC QUARTILE.EXC SMALL VLOOKUP XIRR",
    ),
    (
        "#REF!",
        "#N/A",
        "Excel documents #REF! for what these functions refuse, LibreOffice gives #N/A",
        "SUM",
    ),
    (
        "#REF!",
        "#NULL!",
        "Excel documents #REF! for what these functions refuse, LibreOffice gives #NULL!",
        "LOOKUP",
    ),
    (
        "#REF!",
        "#NUM!",
        "Excel documents #REF! for what these functions refuse, LibreOffice gives #NUM!",
        "FTEST",
    ),
    (
        "#REF!",
        "#VALUE!",
        "Excel documents #REF! for what these functions refuse, LibreOffice gives #VALUE!",
        "&",
    ),
    (
        "#REF!",
        "Err:502",
        "Err:502 is LibreOffice's one code for an argument outside the range of a function",
        "GROWTH HLOOKUP INDEX LINEST LOGEST MDETERM MINVERSE MMULT OFFSET TREND VLOOKUP",
    ),
    (
        "#REF!",
        "Err:504",
        "Err:504 is LibreOffice's code for an argument of a form it does not take",
        "LOOKUP MATCH",
    ),
    (
        "#DIV/0!",
        "Err:517",
        "Err:517 is an inner code of LibreOffice",
        "T",
    ),
    (
        "#REF!",
        "Err:517",
        "Err:517 is an inner code of LibreOffice",
        "T",
    ),
    (
        "#VALUE!",
        "#DIV/0!",
        "Excel documents #VALUE! for what these functions refuse, LibreOffice gives #DIV/0!",
        "* <> CONFIDENCE.T IF PROB",
    ),
    (
        "#VALUE!",
        "#N/A",
        "Excel documents #VALUE! for what these functions refuse, LibreOffice gives #N/A",
        "/ ^",
    ),
    (
        "#VALUE!",
        "#NAME?",
        "Excel documents #VALUE! for what these functions refuse, LibreOffice gives #NAME?",
        "COUNTIFS SUM",
    ),
    (
        "#VALUE!",
        "#NUM!",
        "Excel documents #VALUE! for what these functions refuse, LibreOffice gives #NUM!",
        "& * POWER SUM ^",
    ),
    (
        "#VALUE!",
        "#REF!",
        "Excel documents #VALUE! for what these functions refuse, LibreOffice gives #REF!",
        "&",
    ),
)
CODES: tuple[Known, ...] = (
    record(
        "several faults at once",
        "",
        SEVERAL,
        "Which of several faults is reported depends on the order in which arguments are looked at.",
        standard="silent",
        excel="ours",
        errors=True,
    ),
    *(
        record(f"{ours} as {shown}", heads, refused(ours, shown), why, standard="silent", excel="ours", errors=True)
        for ours, shown, why, heads in TABLE
    ),
)
