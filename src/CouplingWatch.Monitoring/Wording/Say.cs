using System.Globalization;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Wording;

/// <summary>How numbers and names are written in sentences: three digits, powers of ten as 10⁻⁷, invariant culture.</summary>
internal static class Say
{
    private const string Raised = "⁰¹²³⁴⁵⁶⁷⁸⁹";

    /// <summary>Three significant digits: 2,381 · 0.197 · 3.2·10⁻⁷.</summary>
    public static string Number(double value)
    {
        if (double.IsNaN(value)) return "not a number";
        if (double.IsInfinity(value)) return value > 0 ? "infinity" : "minus infinity";
        if (value == 0) return "0";
        var size = Math.Abs(value);
        if (size is >= 1000 and < 1e6) return value.ToString("#,0", CultureInfo.InvariantCulture);
        if (size is >= 0.001 and < 1000) return Digits(value, 3).ToString("0.######", CultureInfo.InvariantCulture);
        return Power(value);
    }

    /// <summary>10⁻⁷ for an exact power of ten, 3.2·10⁻⁷ otherwise.</summary>
    public static string Power(double value)
    {
        if (value == 0 || !double.IsFinite(value)) return Number(value);
        var exponent = (int)Math.Floor(Math.Log10(Math.Abs(value)) + 1e-12);
        var mantissa = Digits(value / Math.Pow(10, exponent), 2);
        if (Math.Abs(mantissa) >= 10)
        {
            mantissa /= 10;
            exponent++;
        }
        var power = "10" + Superscript(exponent);
        return mantissa == 1 ? power : mantissa.ToString("0.#", CultureInfo.InvariantCulture) + "·" + power;
    }

    /// <summary>A span of time for people: 40 s, 47 min, 3.2 h, 2.5 days.</summary>
    public static string Seconds(double seconds) => seconds switch
    {
        < 90 => seconds.ToString("0", CultureInfo.InvariantCulture) + " s",
        < 5400 => (seconds / 60).ToString("0", CultureInfo.InvariantCulture) + " min",
        < 48 * 3600 => (seconds / 3600).ToString("0.#", CultureInfo.InvariantCulture) + " h",
        _ => (seconds / 86400).ToString("0.#", CultureInfo.InvariantCulture) + " days",
    };

    public static string Count(int n, string one, string many) => n == 1 ? "1 " + one : n.ToString("#,0", CultureInfo.InvariantCulture) + " " + many;

    public static string Method(CouplingMethod method) => method switch
    {
        CouplingMethod.Fixed => "fixed",
        CouplingMethod.Aitken => "aitken",
        CouplingMethod.IqnIls => "iqn-ils",
        CouplingMethod.IqnIlsm => "iqn-ilsm",
        CouplingMethod.Mvqn => "mvqn",
        _ => "other",
    };

    public static string Rule(FilterRule rule) => rule switch
    {
        FilterRule.PivotRatio => "pivot-ratio",
        FilterRule.OwnNorm => "own-norm",
        FilterRule.None => "none",
        _ => "other",
    };

    private static string Superscript(int exponent)
    {
        var digits = Math.Abs(exponent).ToString(CultureInfo.InvariantCulture);
        return (exponent < 0 ? "⁻" : "") + string.Concat(digits.Select(d => Raised[d - '0']));
    }

    private static double Digits(double value, int digits)
    {
        var exponent = (int)Math.Floor(Math.Log10(Math.Abs(value)));
        var decimals = Math.Clamp(digits - 1 - exponent, 0, 15);
        return Math.Round(value, decimals);
    }
}
