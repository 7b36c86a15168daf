using System.Text.Json.Nodes;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Recordings;

/// <summary>The examination: labelled recordings of real coupled solves (tests/reference/recordings).</summary>
public sealed class LabelledRecordingTests
{
    public static TheoryData<string> Names => [.. Recording.All.Select(r => r.Name)];

    [Theory]
    [MemberData(nameof(Names))]
    public void Every_labelled_condition_is_found_at_or_after_its_seq(string name)
    {
        var recording = Recording.Of(name);
        var alerts = recording.Judgement.Alerts;
        foreach (var condition in recording.Label["conditions"]!.AsArray())
            Assert.Contains(alerts, a => a.Check == (string)condition!["check"]! && a.Seq >= (long)condition["fromSeq"]!);
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Nothing_is_raised_that_is_neither_labelled_nor_allowed(string name)
    {
        var recording = Recording.Of(name);
        var allowed = recording.Label["conditions"]!.AsArray().Select(c => (string)c!["check"]!)
            .Concat(recording.Label["mayAlso"]!.AsArray().Select(c => (string)c!)).ToHashSet();
        Assert.All(recording.Judgement.Alerts, a => Assert.Contains(a.Check, allowed));
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void The_advice_holds_one_of_the_labelled_moves(string name)
    {
        var recording = Recording.Of(name);
        var wanted = recording.Label["adviceAnyOf"]!.AsArray();
        if (wanted.Count == 0) return;
        var given = recording.Judgement.AdviceGiven;
        Assert.Contains(given, a => wanted.Any(w => Matches(a, w!)));
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Every_alert_is_a_sentence_with_evidence(string name)
    {
        foreach (var alert in Recording.Of(name).Judgement.Alerts)
        {
            Assert.EndsWith(".", alert.Text, StringComparison.Ordinal);
            Assert.DoesNotContain("NaN", alert.Text, StringComparison.Ordinal);
            Assert.NotEmpty(alert.Evidence);
            Assert.Equal($"{name}~{alert.Check}~{alert.Seq}", alert.Id);
        }
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Steps_and_iterations_are_counted_as_labelled(string name)
    {
        var recording = Recording.Of(name);
        var monitor = recording.Judgement;
        var outcomes = recording.Label["outcomes"]!.AsObject();
        Assert.Equal((int)recording.Label["steps"]! - ((int?)outcomes["cut"] ?? 0), monitor.StepCount);
        Assert.Equal((long)recording.Label["iterations"]!, monitor.IterationCount);
    }

    internal static bool Matches(Advice advice, JsonNode wanted) =>
        advice.Setting == (string?)wanted["setting"]
        && (wanted["move"] is not { } move || advice.Move == (string?)move)
        && (wanted["to"] is not { } to || advice.To == (string?)to)
        && (wanted["min"] is not { } min || advice.Value >= (double)min)
        && (wanted["max"] is not { } max || advice.Value <= (double)max);
}
