using CouplingWatch.Coupling;
using CouplingWatch.Monitoring;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Tests.Synthetic;

/// <summary>Groups, weights, sketches, mapped and foreign bases: the same judgement where it can be had, and "not judged" where it cannot.</summary>
public sealed class GroupTests
{
    private static readonly MethodSettings Starving = new() { HistorySteps = 4, FilterRule = SecantFilter.PivotRatio, FilterThreshold = 1e-1 };

    private static CoupledProblem Starved(Func<IterationRecord, IterationRecord> sent, Func<OpenRecord, OpenRecord>? opened = null) =>
        new() { Method = Starving, Steps = 3, Sent = sent, Opened = opened ?? (o => o) };

    [Fact]
    public void Basis_checks_run_per_group_and_name_the_group()
    {
        var monitor = Starved(
            r => r with { Vectors = null, Basis = null, Groups = new Dictionary<string, GroupData> { ["gate"] = new(r.Vectors, null, r.Basis) } },
            o => o with { Fields = [o.Fields[0] with { Group = "gate" }] }).Judge();
        var alert = Assert.Single(monitor.Alerts, a => a.Check == "starved");
        Assert.Equal("gate", (string?)alert.Evidence["group"]);
        Assert.Equal("gate", monitor.Basis()!.Group);
    }

    [Fact]
    public void Vectors_alone_are_filtered_by_the_declared_rule() =>
        Assert.Contains(Starved(r => r with { Basis = null }).Judge().Alerts, a => a.Check == "starved");

    [Fact]
    public void A_basis_kept_from_before_the_first_record_is_not_judged_from_vectors_until_it_has_aged_out()
    {
        var monitor = new RunMonitor("own");
        var problem = new CoupledProblem { Steps = 8, Sent = r => r with { Basis = null }, Opened = o => o with { Continues = new Continuation("own-0", 40, "kept") } };
        foreach (var record in problem.Records())
        {
            monitor.Observe(record, DateTimeOffset.UnixEpoch);
            if (record is not IterationRecord) continue;
            Assert.Equal(monitor.State.Basis.ForeignSteps > 0, monitor.NotJudged.Any(n => n.Check == "starved"));
        }
        Assert.Equal(0, monitor.State.Basis.ForeignSteps);
        Assert.False(monitor.State.Learning.Holds && monitor.StepCount < 4);
    }

    [Fact]
    public void Fields_of_different_units_without_weights_are_not_stacked()
    {
        FieldDeclaration[] fields = [new() { Name = "displacement", Unit = "m", Size = 12, Relative = 1e-7 }, new() { Name = "heat", Unit = "K", Size = 12, Relative = 1e-7 }];
        var unweighted = Starved(r => r with { Basis = null }, o => o with { Fields = fields }).Judge();
        Assert.DoesNotContain(unweighted.Alerts, a => a.Check == "starved");
        Assert.Contains(unweighted.NotJudged, n => n.Check == "starved" && n.Send.StartsWith("weights", StringComparison.Ordinal));
        var weighted = Starved(r => r with { Basis = null }, o => o with { Fields = [.. fields.Select(f => f with { Weight = 2 })] }).Judge();
        Assert.Contains(weighted.Alerts, a => a.Check == "starved");
    }

    [Fact]
    public void Weights_scale_their_stretch_of_the_stacked_vector()
    {
        FieldDeclaration[] fields = [new() { Name = "a", Unit = "m", Size = 2, Weight = 1, Relative = 1e-7 }, new() { Name = "b", Unit = "K", Size = null, Weight = 1000, Relative = 1e-7 }];
        var monitor = new RunMonitor("own");
        monitor.Observe(new OpenRecord { Seq = 0, Fields = fields, Settings = new CouplingSettings { Method = CouplingMethod.IqnIls } }, DateTimeOffset.UnixEpoch);
        monitor.Observe(new IterationRecord { Seq = 1, Step = 0, Iteration = 0, Residuals = NamedValues.Of(("a", 5), ("b", 1)), Vectors = new VectorPair([3, 4, 1], [1, 1, 1]) }, DateTimeOffset.UnixEpoch);
        Assert.Equal([3, 4, 1000], monitor.State.Basis.Groups[0].Vectors.Newest!.Residual);
        Assert.Equal(Math.Sqrt(25 + 1e6), monitor.State.Fields.Norm, 1e-9);
    }

    [Fact]
    public void After_a_resize_earlier_columns_and_paths_are_gone()
    {
        var monitor = new RunMonitor("own");
        long seq = 0;
        foreach (var record in new CoupledProblem { Steps = 6 }.Records())
        {
            if (record is CloseRecord) break;
            monitor.Observe(record, DateTimeOffset.UnixEpoch);
            seq = record.Seq;
        }
        Assert.True(monitor.State.Paths.Count > 0);
        monitor.Observe(new ResizeRecord { Seq = seq + 1, Fields = [new FieldDeclaration { Name = "displacement", Unit = "m", Size = 30, Relative = 1e-7 }], BasisMapped = true }, DateTimeOffset.UnixEpoch);
        Assert.Equal(0, monitor.State.Paths.Count);
        Assert.Null(monitor.State.Basis.Groups[0].Columns);
        Assert.Equal(4, monitor.State.Basis.ForeignSteps);
        Assert.Equal("resize", monitor.State.Learning.Since);
    }
}
