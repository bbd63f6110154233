"""Which functions are tried and with what: the words for typical arguments, function by function."""

from __future__ import annotations

from cellsection.workbook.builtins import BUILTINS

__all__ = ["ABSENT", "PREFIXED", "SPELLED", "arguments_of", "names", "words_of"]


def words_of(text: str) -> frozenset[str]:
    """The words of a text."""
    return frozenset(text.split())


# Functions that a file spells with _xlfn. (ECMA-376 knows them not; measured: LibreOffice 7.4 reads them so only).
PREFIXED = words_of(
    """
    ACOT ACOTH AGGREGATE ARABIC BASE BETA.DIST BETA.INV BINOM.DIST BINOM.INV BITAND BITLSHIFT BITOR BITRSHIFT
    BITXOR CEILING.MATH CEILING.PRECISE CHISQ.DIST CHISQ.DIST.RT CHISQ.INV CHISQ.INV.RT CHISQ.TEST COMBINA
    CONCAT CONFIDENCE.NORM CONFIDENCE.T COT COTH COVARIANCE.P COVARIANCE.S CSC CSCH DAYS DECIMAL ENCODEURL
    ERF.PRECISE ERFC.PRECISE EXPON.DIST F.DIST F.DIST.RT F.INV F.INV.RT F.TEST FLOOR.MATH FLOOR.PRECISE
    FORECAST.LINEAR FORMULATEXT GAMMA GAMMA.DIST GAMMA.INV GAMMALN.PRECISE GAUSS HYPGEOM.DIST ISFORMULA
    ISOWEEKNUM LOGNORM.DIST LOGNORM.INV MAXIFS MINIFS MODE.MULT MODE.SNGL MUNIT NEGBINOM.DIST NORM.DIST NORM.INV
    NORM.S.DIST NORM.S.INV NUMBERVALUE PDURATION PERCENTILE.EXC PERCENTILE.INC PERCENTRANK.EXC PERCENTRANK.INC
    PERMUTATIONA PHI POISSON.DIST QUARTILE.EXC QUARTILE.INC RANK.AVG RANK.EQ RRI SEC SECH SHEET SHEETS SKEW.P
    STDEV.P STDEV.S T.DIST T.DIST.2T T.DIST.RT T.INV T.INV.2T T.TEST TEXTJOIN UNICHAR UNICODE VAR.P VAR.S
    WEIBULL.DIST XOR Z.TEST IFNA IFS SWITCH
    """
)
# Functions that LibreOffice 7.4 answers with #NAME? in every spelling a file gives them.
ABSENT = words_of(
    """
    MULTIPLE.OPERATIONS ARRAYTOTEXT BINOM.DIST.RANGE CHOOSECOLS CHOOSEROWS DROP EXPAND FILTER HSTACK PERCENTOF
    RANDARRAY REGEXEXTRACT REGEXREPLACE REGEXTEST SEQUENCE SORT SORTBY TAKE TEXTAFTER TEXTBEFORE TEXTSPLIT TOCOL
    TOROW UNIQUE VALUETOTEXT VSTACK WRAPCOLS WRAPROWS XLOOKUP XMATCH LET
    """
)
# Functions of the clock, of chance and of the machine, which no two programs give alike.
UNREPEATABLE = words_of(
    """
    NOW TODAY RAND RANDBETWEEN RANDARRAY INFO CELL
    """
)
# Forms that the compiler knows itself.
FORMS = {
    "IF": "yes any any?", "IFERROR": "any any", "IFNA": "any any", "IFS": "yes any yes any",
    "SWITCH": "count any any any any?", "CHOOSE": "count any any any?",
}  # fmt: skip

# Typical arguments, in words that values.py explains; a function not named here gets them from its declared kinds.
TYPICAL = """
ACCRINT day later later rate money frequency basis?
ACCRINTM day later rate money basis?
ADDRESS count count four? yes? text?
AGGREGATE functioncode optioncode numbers small?
AMORLINC money day later money count rate basis?
AVERAGEIF mixed criterion numbers?
AVERAGEIFS numbers mixed criterion mixed? criterion?
BASE count base small?
BESSELI positive small
BESSELJ positive small
BESSELK positive small
BESSELY positive small
BETA.DIST fraction positive positive yes number? number?
BETADIST fraction positive positive number? number?
BETA.INV fraction positive positive number? number?
BETAINV fraction positive positive number? number?
BIN2DEC binary
BIN2HEX binary small?
BIN2OCT binary small?
BINOM.DIST small count fraction yes
BINOMDIST small count fraction yes
BINOM.INV count fraction fraction
CRITBINOM count fraction fraction
BITAND count count
BITLSHIFT count small
BITOR count count
BITRSHIFT count small
BITXOR count count
CHAR code
CHISQ.DIST positive small yes
CHISQ.INV fraction small
CHIINV fraction small
CHISQ.INV.RT fraction small
COMBIN count small
COMBINA count small
PERMUT count small
PERMUTATIONA count small
DELTA number number?
COMPLEX number number letter?
CONFIDENCE fraction positive count
CONFIDENCE.NORM fraction positive count
CONFIDENCE.T fraction positive count
CONVERT number unit unit
COUNTIF mixed criterion
COUNTIFS mixed criterion mixed? criterion?
COUPDAYBS day later frequency basis?
COUPDAYS day later frequency basis?
COUPDAYSNC day later frequency basis?
COUPNCD day later frequency basis?
COUPNUM day later frequency basis?
COUPPCD day later frequency basis?
CUMIPMT rate count money small small zeroone
CUMPRINC rate count money small small zeroone
DATE year count count
DATEDIF day later interval
DATEVALUE datetext
DAVERAGE base field criteria
DCOUNT base field criteria
DCOUNTA base field criteria
DGET base field criteria
DMAX base field criteria
DMIN base field criteria
DPRODUCT base field criteria
DSTDEV base field criteria
DSTDEVP base field criteria
DSUM base field criteria
DVAR base field criteria
DVARP base field criteria
DAYS day day
DAYS360 day day yes?
DB money money count small count?
DDB money money count small positive?
DEC2BIN number small?
DEC2HEX number small?
DEC2OCT number small?
DECIMAL digits base
DISC day later money money basis?
DOLLAR number small?
DOLLARDE number count
DOLLARFR number count
DURATION day later rate rate frequency basis?
EDATE day small
EFFECT rate small
EOMONTH day small
EXPON.DIST positive positive yes
EXPONDIST positive positive yes
F.DIST positive small small yes
F.INV fraction small small
FINV fraction small small
F.INV.RT fraction small small
FACT small
FACTDOUBLE small
FIXED number small? yes?
FREQUENCY numbers numbers
FV rate count money money? zeroone?
FVSCHEDULE money fractions
GAMMA.DIST positive positive positive yes
GAMMADIST positive positive positive yes
GAMMA.INV fraction positive positive
GAMMAINV fraction positive positive
GROWTH positives numbers? numbers? yes?
GCD count count? counts?
LCM count count? counts?
HEX2BIN digits small?
HEX2DEC digits
HEX2OCT digits small?
HLOOKUP any block small yes?
HYPGEOM.DIST small small small count yes
HYPGEOMDIST small small small count
IMABS complex
IMAGINARY complex
IMARGUMENT complex
IMCONJUGATE complex
IMCOS complex
IMCOSH complex
IMCOT complex
IMCSC complex
IMCSCH complex
IMDIV complex complex
IMEXP complex
IMLN complex
IMLOG10 complex
IMLOG2 complex
IMPOWER complex number
IMPRODUCT complex complex?
IMREAL complex
IMSEC complex
IMSECH complex
IMSIN complex
IMSINH complex
IMSQRT complex
IMSUB complex complex
IMSUM complex complex?
IMTAN complex
INDEX block small small?
INDIRECT address yes?
INTRATE day later money money basis?
IPMT rate small count money money? zeroone?
IRR flows rate?
ISOWEEKNUM day
ISPMT rate small count money
LARGE numbers small
LINEST numbers numbers? yes? yes?
LOGEST positives numbers? yes? yes?
LOGNORM.DIST positive number positive yes
LOGNORMDIST positive number positive
LOGNORM.INV fraction number positive
LOGINV fraction number positive
LOOKUP number sorted numbers?
MATCH number sorted matchkind?
MAXIFS numbers mixed criterion
MINIFS numbers mixed criterion
MDETERM square
MDURATION day later rate rate frequency basis?
MINVERSE square
MIRR flows rate rate
MMULT square square
MULTINOMIAL small small small?
MUNIT small
NEGBINOM.DIST small count fraction yes
NEGBINOMDIST small count fraction
NETWORKDAYS day later days?
NETWORKDAYS.INTL day later weekend? days?
NOMINAL rate small
NORM.INV fraction number positive
NORMINV fraction number positive
NORM.DIST number number positive yes
NORMDIST number number positive yes
NORM.S.INV fraction
NORMSINV fraction
NPER rate money money money? zeroone?
NPV rate flows money?
NUMBERVALUE numbertext separator? separator?
OCT2BIN binary small?
OCT2DEC binary
OCT2HEX binary small?
OFFSET reference small small small? small?
PDURATION rate money money
PERCENTILE numbers fraction
PERCENTILE.EXC numbers fraction
PERCENTILE.INC numbers fraction
PERCENTRANK numbers number small?
PERCENTRANK.EXC numbers number small?
PERCENTRANK.INC numbers number small?
PMT rate count money money? zeroone?
POISSON small positive yes
POISSON.DIST small positive yes
PPMT rate small count money money? zeroone?
PRICE day later rate rate money frequency basis?
PRICEDISC day later rate money basis?
PRICEMAT day later day rate rate basis?
PV rate count money money? zeroone?
QUARTILE numbers small
QUARTILE.EXC numbers small
QUARTILE.INC numbers small
RANK number numbers yes?
RANK.AVG number numbers yes?
RANK.EQ number numbers yes?
RATE count money money money? zeroone?
RECEIVED day later money rate basis?
REPT text small
ROMAN count four?
ROUND number small?
ROUNDDOWN number small?
ROUNDUP number small?
RRI count money money
SERIESSUM number small small numbers
SLN money money count
SMALL numbers small
STANDARDIZE number number positive
SUBTOTAL functioncode numbers
SUMIF mixed criterion numbers?
SUMIFS numbers mixed criterion mixed? criterion?
SYD money money count small
T.DIST number small yes
T.DIST.2T positive small
T.DIST.RT number small
TDIST positive small four
T.INV fraction small
T.INV.2T fraction small
TINV fraction small
T.TEST numbers numbers four four
TTEST numbers numbers four four
TBILLEQ day soon rate
TBILLPRICE day soon rate
TBILLYIELD day soon money
TEXT any pattern
TEXTJOIN text yes words text?
CONCAT words text? words?
FLOOR number number
CEILING number number
TIMEVALUE timetext
TREND numbers numbers? numbers? yes?
TRIMMEAN numbers fraction
TRUNC number small?
UNICHAR code
VALUE numbertext
VDB money money count small small positive? yes?
VLOOKUP any block small yes?
WEEKDAY day weekkind?
WEEKNUM day weekkind?
WEIBULL positive positive positive yes
WEIBULL.DIST positive positive positive yes
WORKDAY day small days?
WORKDAY.INTL day small weekend? days?
XIRR flows dayrow rate?
XNPV rate flows dayrow
YEARFRAC day day basis?
YIELD day later rate money money frequency basis?
YIELDDISC day later money money basis?
YIELDMAT day later day rate money basis?
"""
SPELLED = {line.split()[0]: tuple(line.split()[1:]) for line in TYPICAL.strip().splitlines()}
BY_KIND = {
    "number": "number", "measure": "number", "text": "text", "logical": "yes", "value": "any", "any": "any",
    "array": "numbers", "table": "block", "range": "numbers", "reference": "reference",
}  # fmt: skip


def names() -> list[str]:
    """The functions that are tried."""
    return sorted({*BUILTINS, *FORMS} - ABSENT - UNREPEATABLE)


def arguments_of(name: str) -> tuple[str, ...]:
    """Words for the arguments of a function, those that may be left out with a question mark."""
    if name in FORMS:
        return tuple(FORMS[name].split())
    if name in SPELLED:
        return SPELLED[name]
    declared = BUILTINS[name]
    words = [BY_KIND[kind] for kind in declared.kinds]
    if declared.most is None:
        words += [words[-1]] * 2
    return tuple(word + ("?" if k >= declared.least else "") for k, word in enumerate(words))
