using System.Globalization;

namespace CouplingWatch.Components.Ledger;

/// <summary>Thresholds as people type them and as the slider counts them (decades).</summary>
public static class ThresholdText
{
    /// <summary>Reads "1e-4", "0.0001", "10^-4", "10⁻⁴", "2·10⁻⁵"; null when it is none of these or not 0 ≤ ε &lt; 1.</summary>
    public static double? Parse(string? text)
    {
        if (string.IsNullOrWhiteSpace(text)) return null;
        var plain = Ascii(text);
        var at = plain.IndexOf("10^", StringComparison.Ordinal);
        if (at >= 0)
        {
            var front = plain[..at].TrimEnd('*');
            if (!Number(plain[(at + 3)..], out var power) || !Number(front.Length == 0 ? "1" : front, out var factor)) return null;
            return Valid(factor * Math.Pow(10, power));
        }
        return Number(plain, out var value) ? Valid(value) : null;
    }

    /// <summary>As typed: "1e-4"; a plain 0 for no threshold.</summary>
    public static string Typed(double threshold) =>
        threshold == 0 ? "0" : threshold.ToString("0.###e-0", CultureInfo.InvariantCulture);

    /// <summary>log10 to a tenth, for the slider; 0 counts as <paramref name="low"/>.</summary>
    public static double Decades(double threshold, double low) =>
        threshold <= 0 ? low : Math.Clamp(Math.Round(Math.Log10(threshold), 1), low, 0);

    /// <summary>The threshold at a slider position, to two digits.</summary>
    public static double At(double decades) =>
        double.Parse(Math.Pow(10, decades).ToString("E1", CultureInfo.InvariantCulture), CultureInfo.InvariantCulture);

    // A raised digit also means "to the power": "10⁻⁴" becomes "10^-4".
    private static string Ascii(string text)
    {
        var plain = new System.Text.StringBuilder();
        var raised = false;
        foreach (var c in text)
        {
            var digit = "⁰¹²³⁴⁵⁶⁷⁸⁹".IndexOf(c, StringComparison.Ordinal);
            if ((digit >= 0 || c == '⁻') && !raised)
            {
                plain.Append('^');
                raised = true;
            }
            if (char.IsWhiteSpace(c)) continue;
            plain.Append(digit >= 0 ? (char)('0' + digit) : c switch { '⁻' or '−' => '-', '·' or '×' => '*', ',' => '.', _ => c });
        }
        return plain.ToString();
    }

    private static bool Number(string text, out double value) => double.TryParse(text, NumberStyles.Float, CultureInfo.InvariantCulture, out value);

    private static double? Valid(double value) => value is >= 0 and < 1 ? value : null;
}
