using System.Globalization;
using System.Text;

namespace CouplingWatch.Components.Formatting;

/// <summary>How the pages write numbers: the same everywhere, whatever the machine's culture. Every member is pure.</summary>
public static class Numbers
{
    /// <summary>What stands where a number is not known. The reason belongs beside it (<c>Unknown</c>).</summary>
    public const string Dash = "—";

    private const string Superscripts = "⁰¹²³⁴⁵⁶⁷⁸⁹";

    /// <summary>
    /// A number to <paramref name="digits"/> significant digits (1…15): plain with thousands between 10⁻³ and 10⁶, as a power of ten
    /// outside. Null is a dash; not-a-number and infinities are said in words. Trailing zeros stay, so the precision shows.
    /// </summary>
    public static string Sig(double? value, int digits = 3)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(digits, 1);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(digits, 15);
        if (value is not { } v) return Dash;
        if (NotFinite(v) is { } word) return word;
        if (v == 0) return "0";
        var rounded = double.Parse(v.ToString("E" + (digits - 1), CultureInfo.InvariantCulture), CultureInfo.InvariantCulture);
        var exponent = (int)Math.Floor(Math.Log10(Math.Abs(rounded)) + 1e-12);
        if (exponent is < -3 or >= 6) return Scientific(v, digits);
        return Minus(rounded.ToString("N" + Math.Clamp(digits - 1 - exponent, 0, 15), CultureInfo.InvariantCulture));
    }

    /// <summary>A number with a fixed count of decimals and thousands: <c>4.3</c>, <c>1,204.0</c>.</summary>
    public static string Fixed(double? value, int decimals = 1)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(decimals);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(decimals, 15);
        if (value is not { } v) return Dash;
        return NotFinite(v) ?? Minus(v.ToString("N" + decimals, CultureInfo.InvariantCulture));
    }

    /// <summary><c>3.1 × 10⁻⁴</c>; an exact power of ten is <c>10⁻⁴</c>. Zero is <c>0</c>.</summary>
    public static string Power(double? value, int digits = 2)
    {
        if (value is not { } v) return Dash;
        if (NotFinite(v) is { } word) return word;
        return v == 0 ? "0" : Scientific(v, digits);
    }

    /// <summary><c>10ⁿ</c> for a whole exponent.</summary>
    public static string TenTo(int exponent) => "10" + Superscript(exponent);

    /// <summary>The digits of a whole number raised: <c>−12</c> becomes <c>⁻¹²</c>.</summary>
    public static string Superscript(int number)
    {
        var text = new StringBuilder();
        foreach (var c in number.ToString(CultureInfo.InvariantCulture))
            text.Append(c == '-' ? '⁻' : Superscripts[c - '0']);
        return text.ToString();
    }

    /// <summary>A count with thousands: <c>100,000</c>.</summary>
    public static string Count(long value) => Minus(value.ToString("N0", CultureInfo.InvariantCulture));

    /// <summary>A count with its noun, in the plural where it belongs: <c>1 node</c>, <c>2 nodes</c>.</summary>
    public static string Count(long value, string noun, string? nouns = null) => $"{Count(value)} {(value == 1 ? noun : nouns ?? noun + "s")}";

    /// <summary>Small counts as words, for sentences: <c>six</c>; from thirteen on as digits.</summary>
    public static string Word(int value) => value is >= 0 and <= 12 ? Words[value] : Count(value);

    /// <summary>A share of one as percent without decimals: <c>42 %</c>; below one percent <c>&lt; 1 %</c>.</summary>
    public static string Percent(double? share)
    {
        if (share is not { } s) return Dash;
        if (NotFinite(s) is { } word) return word;
        if (s > 0 && s < 0.01) return "< 1 %";
        if (s > 0.99 && s < 1) return "> 99 %";
        return Minus((s * 100).ToString("N0", CultureInfo.InvariantCulture)) + " %";
    }

    /// <summary>Node-hours: <c>144 node-h</c>, below ten with one decimal, below a twentieth <c>&lt; 0.1 node-h</c>.</summary>
    public static string NodeHours(double? hours) => hours is null ? Dash : Hours(hours.Value) + " node-h";

    /// <summary>The figure of <see cref="NodeHours"/> without its unit.</summary>
    public static string Hours(double hours)
    {
        if (NotFinite(hours) is { } word) return word;
        if (hours > 0 && hours < 0.05) return "< 0.1";
        if (hours == 0) return "0";
        return Fixed(hours, Math.Abs(hours) < 9.95 ? 1 : 0);
    }

    /// <summary>A number and its unit with a space that does not break; the dash alone when the number is not known.</summary>
    public static string WithUnit(double? value, string? unit, int digits = 3) =>
        value is null || string.IsNullOrEmpty(unit) ? Sig(value, digits) : $"{Sig(value, digits)}\u00a0{unit}";

    /// <summary>For SVG coordinates and the like: at most <paramref name="decimals"/> decimals, no thousands, a plain minus.</summary>
    public static string Plain(double value, int decimals = 1)
    {
        var text = Math.Round(value, decimals).ToString("0." + new string('#', decimals), CultureInfo.InvariantCulture);
        return text == "-0" ? "0" : text;
    }

    private static string Scientific(double v, int digits)
    {
        var text = v.ToString("E" + (digits - 1), CultureInfo.InvariantCulture);
        var at = text.IndexOf('E', StringComparison.Ordinal);
        var exponent = int.Parse(text.AsSpan(at + 1), NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture);
        var mantissa = text[..at];
        var exact = Math.Abs(v / Math.Pow(10, exponent) - 1) < 1e-9;
        return exact ? TenTo(exponent) : $"{Minus(mantissa)} × {TenTo(exponent)}";
    }

    private static string? NotFinite(double v) =>
        double.IsNaN(v) ? "not a number" : double.IsPositiveInfinity(v) ? "infinite" : double.IsNegativeInfinity(v) ? "minus infinite" : null;

    private static string Minus(string text) => text.StartsWith('-') ? "−" + text[1..] : text;

    private static readonly string[] Words =
        ["no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "eleven", "twelve"];
}
