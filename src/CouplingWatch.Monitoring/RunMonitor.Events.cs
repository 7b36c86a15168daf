using System.Globalization;
using CouplingWatch.Monitoring.Alerts;
using CouplingWatch.Monitoring.Checks.Hang;
using CouplingWatch.Monitoring.Checks.Silent;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring;

public sealed partial class RunMonitor
{
    /// <summary>Handles what the server saw by its clock or what a person did.</summary>
    public IReadOnlyList<Change> Observe(ServerEvent serverEvent)
    {
        ArgumentNullException.ThrowIfNull(serverEvent);
        changes.Clear();
        findings.Clear();
        AlertEvents.EndShelving(alerts, serverEvent.At, changes);
        switch (serverEvent)
        {
            case SilentEvent e:
                state.At = e.At;
                state.Quiet = true;
                findings.Add(SilentCheck.Late(e.SecondsSilent, e.LimitSeconds));
                Report();
                break;
            case BackEvent:
                state.Quiet = false;
                changes.Add(new Change(ChangeKind.Verdict));
                break;
            case HangEvent e:
                state.At = e.At;
                findings.Add(HangCheck.Hanging(e));
                Report();
                break;
            case PublishedEvent e:
                settings.Published(e);
                OnRacePublished(e);
                changes.Add(new Change(ChangeKind.Settings, e.Revision.ToString(CultureInfo.InvariantCulture)));
                break;
            case RaceStartedEvent e: OnRaceStarted(e); break;
            case RaceStoppedEvent e: OnRaceStopped(e); break;
            case PickedUpEvent e:
                settings.PickedUp(e.Revision);
                changes.Add(new Change(ChangeKind.Settings, e.Revision.ToString(CultureInfo.InvariantCulture)));
                break;
            case DismissedEvent e:
                if (advice.Dismiss(e.AdviceId)) changes.Add(new Change(ChangeKind.Advice));
                break;
            default:
                if (AlertEvents.Apply(alerts, serverEvent) is { } alert) changes.Add(new Change(ChangeKind.Alert, alert));
                break;
        }
        return changes;
    }

    /// <summary>The recording ends here: silence may be judged.</summary>
    public IReadOnlyList<Change> EndOfRecording()
    {
        changes.Clear();
        findings.Clear();
        if (state.Ended) return changes;
        state.Ended = true;
        if (state.Close is not null || state.NextSeq == 0) return changes;
        findings.Add(SilentCheck.Ended(state));
        Report();
        changes.Add(new Change(ChangeKind.Verdict));
        return changes;
    }
}
