using System.Globalization;
using CouplingWatch.Coupling;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Rehearsal;

/// <summary>
/// Replays the latest recorded steps of a run under other settings: the pass is fitted as a linear map to the recorded columns, the
/// coupling methods themselves do the updates. Orders and screens candidates; it decides and publishes nothing, and declines readily.
/// Deterministic. One instance is prepared once and may then be asked by several threads.
/// </summary>
public sealed class SettingsRehearsal
{
    /// <summary>|ln(rehearsed / recorded)| above which it declines.</summary>
    public const double LargestMiss = 0.3;

    /// <summary>A proposal lies at least this share below the settings in use.</summary>
    public const double LeastGain = 0.15;

    public const string Caveat =
        "Replayed from recorded passes: not valid once load, contact or time step differ from the recording; a load that still grows makes later steps harder. It proposes and orders; a race decides.";

    private readonly CouplingSettings inUse;
    private readonly double? noise;
    private readonly WindowPlayer? player;
    private readonly int window;

    private SettingsRehearsal(RehearsalTape tape, RehearsalStage stage, CancellationToken cancel)
    {
        inUse = tape.Settings;
        noise = tape.Open?.Solvers.Max(s => s.Noise);
        window = stage.Window;
        var why = stage.Why ?? Why(inUse, out _);
        if (why is not null)
        {
            Calibration = new RehearsalCalibration(0, null, null, null, false, why);
            return;
        }
        Why(inUse, out var present);
        var space = RecordedSpace.Of(stage.Steps, window, stage.FieldLengths, cancel);
        player = new WindowPlayer(space, PassModel.Fit(space, cancel), stage.Targets);
        var recorded = stage.Steps.Skip(stage.Steps.Count - window).Average(s => s.Count);
        InUse = Play(inUse, present, cancel);
        var miss = Math.Abs(Math.Log(InUse.Mean / recorded));
        var text = miss <= LargestMiss ? null : string.Create(CultureInfo.InvariantCulture, $"the recording cannot be reproduced (replayed {InUse.Mean:0.0}, recorded {recorded:0.0})");
        Calibration = new RehearsalCalibration(window, recorded, InUse.Mean, miss, text is null, text);
    }

    /// <summary>The settings in use replayed; comes before everything else.</summary>
    public RehearsalCalibration Calibration { get; }

    /// <summary>The settings in use as a candidate; null when nothing could be replayed.</summary>
    public RehearsedCandidate? InUse { get; }

    /// <summary>Fits the passes and calibrates. Cost: about twenty decompositions of a matrix with 200 columns.</summary>
    /// <param name="tape">The recorded steps; not changed, and not to be changed meanwhile.</param>
    /// <param name="circumstances">What the checks said of them.</param>
    /// <exception cref="OperationCanceledException">It was cancelled.</exception>
    public static SettingsRehearsal Prepare(RehearsalTape tape, RehearsalCircumstances? circumstances = null, CancellationToken cancel = default)
    {
        ArgumentNullException.ThrowIfNull(tape);
        return new SettingsRehearsal(tape, RehearsalStage.Of(tape, circumstances ?? RehearsalCircumstances.None), cancel);
    }

    /// <summary>Replays candidates, or searches the grid. Without trust it ranks nothing.</summary>
    /// <param name="candidates">Each only what differs from the settings in use; null for the search.</param>
    /// <param name="progress">Share done, 0…1, after each candidate.</param>
    public RehearsalView Run(IReadOnlyList<CouplingSettings>? candidates = null, IProgress<double>? progress = null, CancellationToken cancel = default)
    {
        if (!Calibration.Trusted) return new RehearsalView { Calibration = Calibration, Caveat = Caveat };
        var complete = candidates is null ? CandidateGrid.For(inUse, noise) : [.. candidates.Select(inUse.With)];
        var rehearsed = new List<RehearsedCandidate>();
        for (var i = 0; i < complete.Count; i++)
        {
            if (Why(complete[i], out var settings) is null) rehearsed.Add(Play(complete[i], settings, cancel));
            progress?.Report((i + 1.0) / complete.Count);
        }
        rehearsed.Sort((a, b) => a.Mean.CompareTo(b.Mean));
        var best = rehearsed.FirstOrDefault();
        return new RehearsalView
        {
            Calibration = Calibration,
            Candidates = rehearsed,
            Proposal = best is not null && best.CappedSteps == 0 && best.Mean <= (1 - LeastGain) * InUse!.Mean ? best : null,
            Caveat = Caveat,
        };
    }

    /// <summary>One candidate's score; complete settings.</summary>
    /// <exception cref="InvalidOperationException">Nothing can be replayed; <see cref="Calibration"/> says why.</exception>
    /// <exception cref="ArgumentException">The settings cannot be replayed; the message says why.</exception>
    public RehearsedCandidate Score(CouplingSettings settings, CancellationToken cancel = default)
    {
        ArgumentNullException.ThrowIfNull(settings);
        if (player is null) throw new InvalidOperationException(Calibration.Why);
        return Why(settings, out var replay) is { } why ? throw new ArgumentException(why, nameof(settings)) : Play(settings, replay, cancel);
    }

    private RehearsedCandidate Play(CouplingSettings settings, ReplaySettings replay, CancellationToken cancel)
    {
        var own = player!.Own(replay, cancel);
        var strict = player.Strict(replay, cancel);
        return new RehearsedCandidate(Difference(settings), Math.Sqrt(own.Mean * strict.Mean), own.Mean, strict.Mean, Math.Max(own.CappedSteps, strict.CappedSteps), window);
    }

    private CouplingSettings Difference(CouplingSettings settings) => new()
    {
        Method = settings.Method == inUse.Method ? null : settings.Method,
        Relaxation = settings.Relaxation == inUse.Relaxation ? null : settings.Relaxation,
        HistorySteps = settings.HistorySteps == inUse.HistorySteps ? null : settings.HistorySteps,
        FilterRule = settings.FilterRule == inUse.FilterRule ? null : settings.FilterRule,
        FilterThreshold = settings.FilterThreshold == inUse.FilterThreshold ? null : settings.FilterThreshold,
        IterationCap = settings.IterationCap == inUse.IterationCap ? null : settings.IterationCap,
        PredictorOrder = settings.PredictorOrder == inUse.PredictorOrder ? null : settings.PredictorOrder,
    };

    /// <summary>Why settings cannot be replayed; null when they can.</summary>
    private static string? Why(CouplingSettings settings, out ReplaySettings replay)
    {
        replay = default;
        MethodKind kind;
        switch (settings.Method)
        {
            case CouplingMethod.Fixed: kind = MethodKind.Fixed; break;
            case CouplingMethod.Aitken: kind = MethodKind.Aitken; break;
            case CouplingMethod.IqnIls: kind = MethodKind.IqnIls; break;
            case CouplingMethod.Mvqn: kind = MethodKind.Mvqn; break;
            case CouplingMethod.IqnIlsm: return "a surrogate is in use, which the recording does not hold";
            default: return "the method is not declared, or none that can be replayed";
        }
        if (settings.Relaxation is not > 0) return "the relaxation is not declared";
        var quasi = kind is MethodKind.IqnIls;
        if (quasi && settings.HistorySteps is null) return "the history is not declared";
        if (quasi && settings.FilterRule is null or FilterRule.Other) return "the filter rule is not declared, or none that can be replayed";
        if (quasi && settings.FilterRule != FilterRule.None && settings.FilterThreshold is null) return "the filter threshold is not declared";
        if (settings.FilterThreshold is { } threshold && threshold is not (>= 0 and < 1)) return "the filter threshold lies outside 0 ≤ ε < 1";
        if (settings.PredictorOrder is < 0 or > 2) return "the order of the start lies outside 0, 1, 2";
        var method = new MethodSettings
        {
            Method = kind,
            Relaxation = settings.Relaxation.Value,
            HistorySteps = settings.HistorySteps ?? 0,
            FilterRule = settings.FilterRule switch { FilterRule.PivotRatio => SecantFilter.PivotRatio, FilterRule.None => SecantFilter.None, _ => SecantFilter.OwnNorm },
            FilterThreshold = settings.FilterThreshold ?? 0,
        };
        replay = new ReplaySettings(method, settings.PredictorOrder ?? 0, settings.IterationCap ?? 100);
        return null;
    }
}
