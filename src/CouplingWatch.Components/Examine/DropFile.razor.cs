using Microsoft.AspNetCore.Components;
using Microsoft.JSInterop;

namespace CouplingWatch.Components.Examine;

/// <summary>Takes a recording from the reader's disk to <c>POST /api/examinations</c>; the file goes from the browser straight to the server.</summary>
public sealed partial class DropFile : IAsyncDisposable
{
    private IJSObjectReference? module;
    private DotNetObjectReference<DropFile>? self;
    private string? reading;
    private string name = "";
    private ExaminedFile? file;

    [Inject] private IJSRuntime Js { get; set; } = null!;

    protected override async Task OnAfterRenderAsync(bool firstRender)
    {
        if (!firstRender) return;
        self = DotNetObjectReference.Create(this);
        module = await Js.InvokeAsync<IJSObjectReference>("import", "./js/drop.js");
        await module.InvokeVoidAsync("begin", "drop-zone", "drop-file", self);
    }

    /// <summary>The browser has begun to send a file.</summary>
    [JSInvokable]
    public void Reading(string fileName)
    {
        (name, reading, file) = (fileName, fileName, null);
        StateHasChanged();
    }

    /// <summary>The answer, shortened by the browser's side to what is shown; empty when it was cancelled.</summary>
    [JSInvokable]
    public void Judged(string answer)
    {
        reading = null;
        file = answer.Length == 0 ? null : ExaminedFile.Read(answer);
        StateHasChanged();
    }

    private async Task CancelAsync()
    {
        if (module is not null) await module.InvokeVoidAsync("cancel");
    }

    public async ValueTask DisposeAsync()
    {
        self?.Dispose();
        if (module is null) return;
        try
        {
            await module.InvokeVoidAsync("cancel");
            await module.DisposeAsync();
        }
        catch (Exception e) when (e is JSDisconnectedException or JSException or OperationCanceledException)
        {
            // The browser has gone; nothing is left to cancel.
        }
    }
}
