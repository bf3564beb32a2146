export { liveDrawing } from '../../shared/record/liveDrawing'
