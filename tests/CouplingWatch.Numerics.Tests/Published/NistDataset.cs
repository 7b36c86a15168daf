using System.Globalization;
using System.Text.RegularExpressions;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>One file of the NIST Statistical Reference Datasets, linear regression: design matrix and certified values.</summary>
internal sealed partial class NistDataset
{
    internal required double[][] Columns { get; init; }
    internal required double[] Response { get; init; }
    internal required double[] Coefficients { get; init; }
    internal required double[] CoefficientDeviations { get; init; }
    internal required double ResidualDeviation { get; init; }

    internal static NistDataset Load(string name)
    {
        string[] lines = File.ReadAllLines(Path.Combine(AppContext.BaseDirectory, "reference", name + ".dat"));
        var ranges = lines.Take(12).Select(l => LineRange().Match(l)).Where(m => m.Success)
            .Select(m => (From: int.Parse(m.Groups[1].Value, CultureInfo.InvariantCulture), To: int.Parse(m.Groups[2].Value, CultureInfo.InvariantCulture))).ToArray();
        string[] certified = lines[(ranges[0].From - 1)..ranges[0].To];
        var parameters = certified.Select(l => ParameterLine().Match(l)).Where(m => m.Success).ToArray();
        string deviation = certified.Last(l => DeviationLine().IsMatch(l));
        double[][] rows = [.. lines[(ranges[1].From - 1)..ranges[1].To].Where(l => l.Trim().Length > 0)
            .Select(l => l.Split(' ', StringSplitOptions.RemoveEmptyEntries | StringSplitOptions.TrimEntries).Select(Number).ToArray())];
        return new NistDataset
        {
            Columns = Design(rows, parameters.Length, intercept: parameters[0].Groups[1].Value == "0"),
            Response = [.. rows.Select(r => r[0])],
            Coefficients = [.. parameters.Select(m => Number(m.Groups[2].Value))],
            CoefficientDeviations = [.. parameters.Select(m => Number(m.Groups[3].Value))],
            ResidualDeviation = Number(DeviationLine().Match(deviation).Groups[1].Value),
        };
    }

    /// <summary>Powers of a single predictor, or the predictors themselves behind a column of ones.</summary>
    private static double[][] Design(double[][] rows, int parameters, bool intercept)
    {
        int predictors = rows[0].Length - 1;
        return [.. Enumerable.Range(0, parameters).Select(j => rows.Select(r =>
            predictors == 1 ? Power(r[1], intercept ? j : j + 1) : j == 0 ? 1 : r[j]).ToArray())];
    }

    private static double Power(double x, int exponent)
    {
        double result = 1;
        for (int i = 0; i < exponent; i++) result *= x;
        return result;
    }

    private static double Number(string text) => double.Parse(text, CultureInfo.InvariantCulture);

    [GeneratedRegex(@"lines (\d+) to (\d+)")]
    private static partial Regex LineRange();

    [GeneratedRegex(@"^\s*B(\d+)\s+(\S+)\s+(\S+)")]
    private static partial Regex ParameterLine();

    [GeneratedRegex(@"Standard Deviation\s+([0-9.E+-]+)\s*$")]
    private static partial Regex DeviationLine();
}
