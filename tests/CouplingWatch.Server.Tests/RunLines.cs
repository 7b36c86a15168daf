using System.Globalization;
using System.Text;

namespace CouplingWatch.Server.Tests;

/// <summary>Lines of a small run: one field, two solvers, residuals that fall by a factor of ten a pass.</summary>
internal static class RunLines
{
    public const string Instance = "a1b2c3";

    public static string Open(string? instance = Instance, string more = "") => Line($$"""
        {"kind":"open","seq":0,"format":1,{{(instance is null ? "" : $"\"instance\":\"{instance}\",")}}"at":"2026-12-01T08:00:00Z","campaign":"north-lock","title":"small leaf","scheme":"serial","stepping":"transient","solvers":[{"name":"water"},{"name":"leaf"}],"fields":[{"name":"deflection","unit":"m","size":3,"role":"unknown","from":"leaf","relative":1e-6}],"settings":{"method":"iqn-ils","relaxation":0.1,"historySteps":4,"filterRule":"pivot-ratio","filterThreshold":0.01,"iterationCap":40,"tolerance":1e-6},"adjustable":{"relaxation":[0.01,1],"filterRule":["own-norm","pivot-ratio"],"filterThreshold":[1e-12,0.1],"historySteps":[0,40],"iterationCap":[5,100],"commands":["dropHistory","stop"]},"timeStep":0.01,"endTime":4.0,"nodes":2,"labels":{"thickness_mm":"80"}{{more}}}
        """);

    public static string Iteration(long seq, int step, int iteration, double? residual = null, string more = "") => Line(string.Create(CultureInfo.InvariantCulture,
        $$"""{"kind":"iteration","seq":{{seq}},"step":{{step}},"iteration":{{iteration}},"residuals":{"deflection":{{residual ?? Math.Pow(10, -2 - 2 * iteration):R}}},"magnitudes":{"deflection":0.02},"passSeconds":1{{more}}}"""));

    public static string Step(long seq, int step, int iterations, string outcome = "converged") =>
        Line($$"""{"kind":"step","seq":{{seq}},"step":{{step}},"iterations":{{iterations}},"outcome":"{{outcome}}"}""");

    public static string Remark(long seq, string text = "inner solver restarted") => Line($$"""{"kind":"remark","seq":{{seq}},"text":"{{text}}"}""");

    public static string Close(long seq) => Line($$"""{"kind":"close","seq":{{seq}},"outcome":"finished"}""");

    /// <summary>Whole steps of four passes each, from <c>open</c> on.</summary>
    public static IReadOnlyList<string> Steps(int count, int passes = 4)
    {
        List<string> lines = [Open()];
        for (var step = 0; step < count; step++)
        {
            for (var k = 0; k < passes; k++) lines.Add(Iteration(lines.Count, step, k));
            lines.Add(Step(lines.Count, step, passes));
        }
        return lines;
    }

    public static string Joined(IEnumerable<string> lines) => lines.Aggregate(new StringBuilder(), (text, line) => text.Append(line)).ToString();

    private static string Line(string text) => text.Trim() + "\n";
}
