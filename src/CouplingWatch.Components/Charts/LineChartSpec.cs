using System.Text.Json;
using System.Text.Json.Serialization;

namespace CouplingWatch.Components.Charts;

/// <summary>What a line plot shows, in data units. Its dress (colour, width, dash) follows from the roles, in css.</summary>
public sealed record LineChartSpec
{
    /// <summary>Most points of a series that reach the browser; a longer one is thinned, keeping its extremes.</summary>
    public const int MostPoints = 500;

    public required ChartAxis X { get; init; }
    public required ChartAxis Y { get; init; }
    public IReadOnlyList<ChartSeries> Series { get; init; } = [];
    public IReadOnlyList<ChartRule> Rules { get; init; } = [];
    public IReadOnlyList<ChartNote> Notes { get; init; } = [];

    /// <summary>The form the script reads; equal plots give equal text, so an unchanged one is not sent again.</summary>
    public string ToJson() => JsonSerializer.Serialize(this with { Series = [.. Series.Select(s => s.Thinned(MostPoints).Rounded())] }, Options);

    private static readonly JsonSerializerOptions Options = new(JsonSerializerDefaults.Web)
    {
        DefaultIgnoreCondition = JsonIgnoreCondition.WhenWritingNull,
        Converters = { new JsonStringEnumConverter(JsonNamingPolicy.CamelCase) },
        Encoder = System.Text.Encodings.Web.JavaScriptEncoder.UnsafeRelaxedJsonEscaping,
    };
}

/// <summary>A line plot's axis. On a log axis the values are log10 and the labels powers of ten.</summary>
/// <param name="Ticks">Number of intervals between <paramref name="Low"/> and <paramref name="High"/>.</param>
/// <param name="Labels">Text of each tick, lowest first (<paramref name="Ticks"/> + 1 of them); an empty text leaves it out.</param>
/// <param name="Opposite">Text of each tick at the other side, lowest first; null: the other side stays empty.</param>
public sealed record ChartAxis(double Low, double High, int Ticks, IReadOnlyList<string> Labels, IReadOnlyList<string>? Opposite = null);

/// <summary>What a series stands for.</summary>
public enum SeriesRole { Band, Cone, Median, Path, Second }

/// <param name="Dots">Draws its points, for paths of few points.</param>
public sealed record ChartSeries(SeriesRole Role, IReadOnlyList<ChartPoint> Points, bool Dots = false)
{
    /// <summary>At most <paramref name="most"/> points: of each run of neighbours the lowest and the highest stay, in their order.</summary>
    public ChartSeries Thinned(int most)
    {
        if (Points.Count <= most) return this;
        var groups = most / 2;
        var kept = new List<ChartPoint>(most);
        for (var g = 0; g < groups; g++)
        {
            var from = (int)((long)g * Points.Count / groups);
            var to = (int)((long)(g + 1) * Points.Count / groups);
            int low = from, high = from;
            for (var i = from; i < to; i++)
            {
                if (Points[i].Y is not { } y) continue;
                if (!(Points[low].Y <= y)) low = i;
                if (!((Points[high].Top ?? Points[high].Y) >= (Points[i].Top ?? y))) high = i;
            }
            kept.Add(Points[Math.Min(low, high)]);
            if (low != high) kept.Add(Points[Math.Max(low, high)]);
        }
        return this with { Points = kept };
    }

    /// <summary>Heights to a ten-thousandth of a decade: what a screen can show. The texts stay exact.</summary>
    public ChartSeries Rounded() => this with { Points = [.. Points.Select(p => p with { Y = Round(p.Y), Top = Round(p.Top) })] };

    private static double? Round(double? value) => value is { } v ? Math.Round(v, 4) : null;
}

/// <param name="Y">Value, or the lower edge of a band; null leaves a gap.</param>
/// <param name="Top">Upper edge, for bands and cones.</param>
/// <param name="Text">What hovering and walking say, exact.</param>
public sealed record ChartPoint(double X, double? Y, double? Top = null, string? Text = null);

/// <summary>What a straight line through the whole plot stands for. Target is horizontal, the others upright.</summary>
public enum RuleRole { Target, Cap, Now, Cursor }

/// <param name="Before">Text on its left, or at the right end of a horizontal one.</param>
/// <param name="After">Text on its right.</param>
public sealed record ChartRule(RuleRole Role, double At, string? Before = null, string? After = null);

/// <summary>Words beside a point of the plot, in the ink of a role.</summary>
/// <param name="Left">Ends at the point instead of beginning there.</param>
public sealed record ChartNote(SeriesRole Role, double X, double Y, string Text, bool Left = false);
