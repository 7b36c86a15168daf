using CouplingWatch.Components.Feed;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;

namespace CouplingWatch.Components.SettingsForm;

/// <summary>The form that publishes a settings revision.</summary>
public sealed partial class SettingsEditor
{
    private SettingsDraft draft = default!;
    private string? problem;
    private bool busy;
    private object? started;
    private bool arrives;
    private ElementReference form;

    [Inject] private IWatchFeed Feed { get; set; } = default!;

    [Parameter, EditorRequired] public string Run { get; set; } = "";
    [Parameter, EditorRequired] public CouplingSettings InForce { get; set; } = default!;
    [Parameter, EditorRequired] public AdjustableSettings Adjustable { get; set; } = default!;

    /// <summary>The newest revision there is.</summary>
    [Parameter, EditorRequired] public int Latest { get; set; }

    /// <summary>Values to begin with: an advice or a filter tried on the ledger. A new instance starts a new draft.</summary>
    [Parameter] public Action<SettingsDraft>? Start { get; set; }

    [Parameter] public EventCallback<int> OnPublished { get; set; }

    [Parameter] public EventCallback OnClose { get; set; }

    private string[] Fixed =>
        [.. SettingKind.All.Where(k => !draft.Adjustable.Allows(k.Name) && k.Get(draft.InForce) is not null).Select(k => $"{k.Words} {k.Shown(draft.InForce)}")];

    protected override void OnParametersSet()
    {
        if (draft is null || !ReferenceEquals(started, Start))
        {
            started = Start;
            arrives = true;
            draft = new SettingsDraft(InForce, Adjustable, Latest);
            Start?.Invoke(draft);
            problem = null;
        }
    }

    protected override async Task OnAfterRenderAsync(bool firstRender)
    {
        if (!arrives) return;
        arrives = false;
        try
        {
            await form.FocusAsync();
        }
        catch (Exception e) when (e is Microsoft.JSInterop.JSException or Microsoft.JSInterop.JSDisconnectedException)
        {
            // The form was closed again before it could take the focus.
        }
    }

    private async Task PublishAsync()
    {
        if (busy || draft.Hindrance is not null) return;
        busy = true;
        problem = null;
        try
        {
            var outcome = await Feed.PublishAsync(Run, draft.Proposal(), draft.MadeFrom);
            problem = outcome.Problem;
            if (outcome.Revision is { } revision) await OnPublished.InvokeAsync(revision);
        }
        finally
        {
            busy = false;
        }
    }

    private void Rebase()
    {
        draft = draft.From(InForce, Latest);
        problem = null;
    }

    private string May(SettingKind kind) =>
        draft.Adjustable.Ranges.TryGetValue(kind.Name, out var range) ? SettingsDraft.Range(range) : "as declared by the run";

    private static string Id(SettingKind kind) => "set-" + kind.Name;

    private static string Value(ChangeEventArgs e) => e.Value as string ?? "";
}
