using System.Globalization;
using System.Text;

namespace CouplingWatch.Monitoring.Tests.Recordings;

/// <summary>
/// The table of the examination: per condition how many were labelled and found and after how many records, per healthy recording what was raised, and
/// false alerts per 10,000 healthy iterations. Printed by <c>dotnet test tests/CouplingWatch.Monitoring.Tests --filter ExaminationTable --logger "console;verbosity=detailed"</c>.
/// </summary>
public sealed class ExaminationTableTests(ITestOutputHelper output)
{
    [Fact]
    public void The_table_of_the_examination_has_no_miss_and_no_false_alert()
    {
        var conditions = new SortedDictionary<string, (int Labelled, int Found, List<long> Delays)>(StringComparer.Ordinal);
        long healthyIterations = 0, falseAlerts = 0;
        var advice = (Wanted: 0, Right: 0);
        foreach (var recording in Recording.All)
        {
            var judged = recording.Judgement;
            var allowed = recording.Label["mayAlso"]!.AsArray().Select(c => (string)c!).ToHashSet();
            foreach (var condition in recording.Label["conditions"]!.AsArray())
            {
                var check = (string)condition!["check"]!;
                var from = (long)condition["fromSeq"]!;
                allowed.Add(check);
                var (labelled, found, delays) = conditions.TryGetValue(check, out var known) ? known : (0, 0, []);
                var first = judged.Alerts.Where(a => a.Check == check && a.Seq >= from).Select(a => (long?)a.Seq).Min();
                if (first is { } seq) delays.Add(seq - from);
                conditions[check] = (labelled + 1, found + (first is null ? 0 : 1), delays);
            }
            if ((bool)recording.Label["healthy"]!) healthyIterations += judged.IterationCount;
            falseAlerts += judged.Alerts.Count(a => !allowed.Contains(a.Check));
            if (recording.Label["adviceAnyOf"]!.AsArray() is not { Count: > 0 } wanted) continue;
            advice.Wanted++;
            if (judged.AdviceGiven.Any(a => wanted.Any(w => LabelledRecordingTests.Matches(a, w!)))) advice.Right++;
        }
        var table = new StringBuilder().AppendLine("condition         labelled  found  records from label to alert (median, most)");
        foreach (var (check, (labelled, found, delays)) in conditions)
        {
            delays.Sort();
            table.AppendLine(CultureInfo.InvariantCulture, $"{check,-17} {labelled,8} {found,6}  {(delays.Count == 0 ? "—" : $"{delays[delays.Count / 2]}, {delays[^1]}")}");
        }
        var all = conditions.Values.Sum(c => c.Labelled);
        var foundAll = conditions.Values.Sum(c => c.Found);
        table.AppendLine(CultureInfo.InvariantCulture, $"{"all",-17} {all,8} {foundAll,6}");
        table.AppendLine(CultureInfo.InvariantCulture, $"false alerts: {falseAlerts} in all recordings; {10_000.0 * falseAlerts / healthyIterations:0.0} per 10,000 of {healthyIterations} healthy iterations");
        table.AppendLine(CultureInfo.InvariantCulture, $"advice: {advice.Right} of {advice.Wanted} labelled recordings got one of the labelled moves");
        output.WriteLine(table.ToString());
        Assert.Equal((all, 0L, advice.Wanted), (foundAll, falseAlerts, advice.Right));
        Assert.Equal(22, all);
    }
}
