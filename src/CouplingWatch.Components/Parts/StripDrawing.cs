using System.Text;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Parts;

/// <summary>
/// The step strip as a handful of SVG paths, one for each ink, in a box of 10 units a bar by 100: bars stand on the line at 84, marks of
/// steps that gave up or were redone lie below it. A run of a million steps costs the same few elements as one of a hundred.
/// </summary>
public sealed class StripDrawing
{
    /// <summary>Most bars of a strip; more are folded, keeping the worst.</summary>
    public const int MostBars = 300;

    internal const double Base = 84, Top = 4, Pitch = 10;

    private StripDrawing(IReadOnlyList<StripBar> bars) => Bars = bars;

    /// <summary>The bars drawn, after folding.</summary>
    public IReadOnlyList<StripBar> Bars { get; }

    public int Width => Math.Max(1, Bars.Count) * (int)Pitch;

    /// <summary>Iterations that a bar of full height stands for: the larger of 12 and the run's most.</summary>
    public int Most { get; private init; }

    /// <summary>True when a bar stands for more than one step.</summary>
    public bool Grouped { get; private init; }

    /// <summary>Path of the bars of each ink, <c>m0</c> (barely met) … <c>m4</c> (far below); empty where none.</summary>
    public IReadOnlyList<string> Inks { get; private init; } = [];

    public string Gave { get; private init; } = "";
    public string Hollow { get; private init; } = "";
    public string Brackets { get; private init; } = "";
    public string Whiskers { get; private init; } = "";
    public string Notches { get; private init; } = "";
    public string BaseLine { get; private init; } = "";

    /// <summary>Folds to at most <paramref name="mostBars"/> bars and draws them. No bars: a base line only.</summary>
    public static StripDrawing Of(IReadOnlyList<StripBar> steps, int mostBars = MostBars)
    {
        ArgumentNullException.ThrowIfNull(steps);
        ArgumentOutOfRangeException.ThrowIfLessThan(mostBars, 1);
        var bars = StripFolding.Fold(steps, mostBars);
        var most = Math.Max(12, bars.Count == 0 ? 0 : bars.Max(b => b.Worst));
        var inks = new StringBuilder[] { new(), new(), new(), new(), new() };
        StringBuilder gave = new(), hollow = new(), brackets = new(), whiskers = new(), notches = new(), line = new("M0 84");
        var redoneSince = -1;
        for (var i = 0; i <= bars.Count; i++)
        {
            var redone = i < bars.Count && bars[i].Redone > 0;
            if (redone && redoneSince < 0) redoneSince = i;
            if (!redone && redoneSince >= 0)
            {
                brackets.Append($"M{P(redoneSince * Pitch + 1)} 88V97H{P(i * Pitch - 1)}V88");
                line.Append($"H{P(i * Pitch - 2)}M{P(i * Pitch + (i < bars.Count ? 2 : 0))} 84");
                redoneSince = -1;
            }
            if (i == bars.Count) break;
            Bar(bars[i], i, most, redone ? hollow : bars[i] is { Unconverged: > 0, Worst: var w, Median: var m } && m >= w ? gave : inks[Ink(bars[i].MarginDecades)], whiskers);
            if (bars[i].Unconverged > 0) gave.Append($"M{P(i * Pitch + 0.6)} 90h8.8v9h-8.8z");
            if (bars[i].Revision is not null) notches.Append($"M{P(i * Pitch + 0.2)} 99V1h5");
        }
        line.Append($"H{P(Math.Max(1, bars.Count) * Pitch)}");
        return new StripDrawing(bars)
        {
            Most = most,
            Grouped = bars.Any(b => b.ToStep > b.FromStep),
            Inks = [.. inks.Select(b => b.ToString())],
            Gave = gave.ToString(),
            Hollow = hollow.ToString(),
            Brackets = brackets.ToString(),
            Whiskers = whiskers.ToString(),
            Notches = notches.ToString(),
            BaseLine = line.ToString(),
        };
    }

    /// <summary>
    /// The step in progress of a run that has completed none, drawn iteration by iteration: height is decades above the target
    /// (or above the least residual where no tolerance is known).
    /// </summary>
    public static string FirstStep(IReadOnlyList<PassPair> passes)
    {
        ArgumentNullException.ThrowIfNull(passes);
        var heights = PairDrawing.Growth(passes);
        var most = Math.Max(1, heights.DefaultIfEmpty(0).Max());
        var path = new StringBuilder();
        for (var i = 0; i < heights.Count; i++)
        {
            var h = Math.Max(1.5, (Base - Top) * heights[i] / most);
            path.Append($"M{P(i * Pitch + 1.4)} {P(Base - h)}h7.2V84h-7.2z");
        }
        return path.ToString();
    }

    /// <summary>Ink of a margin in decades: 0 barely met … 4 far below; 2 when no tolerance is known.</summary>
    public static int Ink(double? marginDecades) => marginDecades switch
    {
        null or double.NaN => 2,
        > -0.15 => 0,
        > -0.5 => 1,
        > -1.1 => 2,
        > -2 => 3,
        _ => 4,
    };

    private static void Bar(StripBar bar, int i, int most, StringBuilder ink, StringBuilder whiskers)
    {
        var x = i * Pitch + 1.4;
        var top = Height(bar.Median, most);
        ink.Append($"M{P(x)} {P(top)}h7.2V84h-7.2z");
        if (bar.Worst > bar.Median) whiskers.Append($"M{P(x + 3.6)} {P(Height(bar.Worst, most))}V{P(top)}");
    }

    private static double Height(double iterations, int most) => Base - (Base - Top) * Math.Clamp(iterations / most, 0, 1);

    private static string P(double v) => Numbers.Plain(v);
}
