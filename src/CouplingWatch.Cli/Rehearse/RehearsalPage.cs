using System.Globalization;
using System.Text;
using CouplingWatch.Monitoring.Race;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Cli.Rehearse;

/// <summary>A rehearsal as a page of text.</summary>
internal static class RehearsalPage
{
    /// <summary>Candidates listed, the best ones.</summary>
    public const int Listed = 20;

    public static string Write(string file, CouplingSettings inUse, RehearsalView view)
    {
        var text = new StringBuilder();
        var calibration = view.Calibration;
        Line($"{file}");
        if (!calibration.Trusted)
        {
            Line($"  not rehearsed: {calibration.Why}.");
            return text.AppendLine().ToString();
        }
        Line($"  The replay of the settings in use gives {calibration.Rehearsed:0.0} iterations a step, {calibration.Recorded:0.0} were recorded over {calibration.Steps} steps: trusted.");
        if (view.Proposal is { } best)
            Line($"  Proposed for a race: {Name(best)}, {best.Mean:0.0} iterations a step, {100 * (1 - best.Mean / calibration.Rehearsed!.Value):0} % fewer.");
        else
            Line($"  Nothing is proposed: no candidate lies 15 % below the settings in use.");
        if (view.Candidates.Count > 0) Line($"  {"iterations",-11}{"own / strict",-15}{"capped",-8}settings");
        foreach (var candidate in view.Candidates.Take(Listed))
            Line($"  {candidate.Mean,-11:0.0}{$"{candidate.Own:0.0} / {candidate.Strict:0.0}",-15}{candidate.CappedSteps,-8}{Name(candidate)}");
        if (view.Candidates.Count > Listed) Line($"  and {view.Candidates.Count - Listed} more (--json lists all)");
        Line($"  {view.Caveat}");
        return text.AppendLine().ToString();

        void Line(FormattableString line) => text.AppendLine(line.ToString(CultureInfo.InvariantCulture));
        string Name(RehearsedCandidate candidate) => SettingsDifference.Describe(inUse, inUse.With(candidate.Settings));
    }
}
