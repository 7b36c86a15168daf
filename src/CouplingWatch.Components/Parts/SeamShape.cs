namespace CouplingWatch.Components.Parts;

/// <summary>The lines of a seam as SVG paths: upright in a box of 30 × 100, lying in one of 100 × 16; the fill lies between the two lines.</summary>
internal sealed record SeamShape(string LeftV, string RightV, string? FillV, string LeftH, string RightH, string? FillH)
{
    public static SeamShape Of(StateMark mark) => mark switch
    {
        StateMark.Dearer => DearerShape,
        StateMark.LosingTime => WideShape,
        StateMark.Diverging => WedgeShape,
        StateMark.Finished => OneShape,
        StateMark.GaveUp => StruckShape,
        _ => ClosedShape,
    };

    private static readonly SeamShape ClosedShape = new("M13.5 0V100", "M16.5 0V100", null, "M0 6.5H100", "M0 9.5H100", null);

    private static readonly SeamShape StruckShape = new("M13.5 0V100", "M16.5 0V100", "M13.5 0H16.5V100H13.5z", "M0 6.5H100", "M0 9.5H100", "M0 6.5V9.5H100V6.5z");

    private static readonly SeamShape OneShape = new("M14.6 0V100", "M15.4 0V100", null, "M0 7.6H100", "M0 8.4H100", null);

    private static readonly SeamShape DearerShape = Bulge(4.2, 3);

    private static readonly SeamShape WideShape = Bulge(9, 7.2);

    private static readonly SeamShape WedgeShape = new(
        "M13.5 0L3 90L13.5 100", "M16.5 0L27 90L16.5 100", "M13.5 0L3 90L13.5 100H16.5L27 90L16.5 0z",
        "M0 6.5L90 0.8L100 6.5", "M0 9.5L90 15.2L100 9.5", "M0 6.5L90 0.8L100 6.5V9.5L90 15.2L0 9.5z");

    /// <summary>Two lines that part, run side by side at half-distance <paramref name="v"/> (upright) or <paramref name="h"/> (lying), and close again.</summary>
    private static SeamShape Bulge(double v, double h)
    {
        var (l, r, t, b) = (P(15 - v), P(15 + v), P(8 - h), P(8 + h));
        var leftV = $"M13.5 0C13.5 10 {l} 8 {l} 20V80C{l} 92 13.5 90 13.5 100";
        var rightV = $"M16.5 0C16.5 10 {r} 8 {r} 20V80C{r} 92 16.5 90 16.5 100";
        var fillV = leftV + $"H16.5C16.5 90 {r} 92 {r} 80V20C{r} 8 16.5 10 16.5 0z";
        var leftH = $"M0 6.5C10 6.5 8 {t} 20 {t}H80C92 {t} 90 6.5 100 6.5";
        var rightH = $"M0 9.5C10 9.5 8 {b} 20 {b}H80C92 {b} 90 9.5 100 9.5";
        var fillH = leftH + $"V9.5C90 9.5 92 {b} 80 {b}H20C8 {b} 10 9.5 0 9.5z";
        return new(leftV, rightV, fillV, leftH, rightH, fillH);
    }

    private static string P(double value) => Formatting.Numbers.Plain(value);
}
